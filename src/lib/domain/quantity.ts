import { significant } from './area';

export { formatArea } from './area';

const SUPERSCRIPTS = '⁰¹²³⁴⁵⁶⁷⁸⁹';

/** An angle in the unit that reads best: `3.1°`, `2.1′`, `4.5″`. */
export function formatAngle(angleDeg: number): string {
	if (Math.abs(angleDeg) >= 1) return `${significant(angleDeg, 2)}°`;
	const arcmin = angleDeg * 60;
	if (Math.abs(arcmin) >= 1) return `${significant(arcmin, 2)}′`;
	return `${significant(arcmin * 60, 2)}″`;
}

/** Odds in words and as a ratio, from their natural log: `yes`, `310 : 1`. 10 : 1 joins, 1 : 10 parts. */
export function formatOdds(logOdds: number): { verdict: string; ratio: string } {
	const log10 = logOdds / Math.LN10;
	const verdict = log10 >= 1 ? 'yes' : log10 > -1 ? 'unsure' : 'no';
	const size = ratioSide(Math.abs(log10));
	return { verdict, ratio: log10 >= 0 ? `${size} : 1` : `1 : ${size}` };
}

function ratioSide(log10: number): string {
	if (log10 >= 5) {
		return `10${[...String(Math.floor(log10))].map((digit) => SUPERSCRIPTS[Number(digit)]).join('')}`;
	}
	const value = 10 ** log10;
	return value < 10 ? value.toFixed(1) : String(Number(value.toPrecision(2)));
}

/** A chance from 0 to 1 with two decimals, never rounded up to certainty or down to none. */
export function formatChance(chance: number): string {
	if (chance > 0 && chance < 0.005) return '<0.01';
	if (chance < 1 && chance > 0.995) return '>0.99';
	return chance.toFixed(2);
}

/** A share from 0 to 1 in percent: `98%`, `<1%`. */
export function formatShare(share: number): string {
	if (share > 0 && share < 0.005) return '<1%';
	if (share < 1 && share > 0.995) return '>99%';
	return `${Math.round(share * 100)}%`;
}

/** A cost of waiting in words: `21 points`, `1 point`, `less than 1 point`, `nothing`. */
export function formatPoints(points: number): string {
	if (points < 0.05) return 'nothing';
	if (points < 0.5) return 'less than 1 point';
	const whole = Math.round(points);
	return `${whole} ${whole === 1 ? 'point' : 'points'}`;
}
