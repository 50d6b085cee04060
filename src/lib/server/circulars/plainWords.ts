import type { Shape } from '../../sky/regions/shape';

/** `2026-12-01 03:41:27 UTC`. */
export function utcSecond(instant: Date): string {
	return `${instant.toISOString().slice(0, 19).replace('T', ' ')} UTC`;
}

/** `2026-12-01 03:41 UTC`. */
export function utcMinute(instant: Date): string {
	return `${instant.toISOString().slice(0, 16).replace('T', ' ')} UTC`;
}

/** An angle with the unit that reads best: `2.8 deg`, `1.4 arcmin`, `3.0 arcsec`. */
export function angleInWords(angleDeg: number): string {
	if (angleDeg >= 1) return `${significant(angleDeg)} deg`;
	if (angleDeg >= 1 / 60) return `${significant(angleDeg * 60)} arcmin`;
	return `${significant(angleDeg * 3600)} arcsec`;
}

/** A solid angle likewise. */
export function areaInWords(areaDeg2: number): string {
	if (areaDeg2 >= 0.1) return `${significant(areaDeg2)} deg2`;
	if (areaDeg2 >= 0.1 / 3600) return `${significant(areaDeg2 * 3600)} arcmin2`;
	return `${significant(areaDeg2 * 3600 * 3600)} arcsec2`;
}

/** A stretch of time since T0: `41 s`, `12 min`, `3.2 h`, `2.1 d`; before T0 with a minus. */
export function elapsedInWords(fromMs: number, toMs: number): string {
	const sign = toMs < fromMs ? '-' : '';
	const seconds = Math.abs(toMs - fromMs) / 1000;
	if (seconds < 99.5) return `${sign}${Math.round(seconds)} s`;
	if (seconds < 99.5 * 60) return `${sign}${Math.round(seconds / 60)} min`;
	if (seconds < 48 * 3600) return `${sign}${(seconds / 3600).toFixed(1)} h`;
	return `${sign}${(seconds / 86_400).toFixed(1)} d`;
}

/** Odds from their natural log: `14 000 : 1`, or the other way round when they are against it. */
export function oddsInWords(logOdds: number): string {
	const odds = Math.exp(Math.min(Math.abs(logOdds), 700));
	const text =
		odds >= 1e6
			? `10^${Math.floor(Math.abs(logOdds) / Math.LN10)}`
			: odds >= 100
				? String(Number(odds.toPrecision(2))).replace(/\B(?=(\d{3})+$)/g, ' ')
				: significant(odds);
	return logOdds >= 0 ? `${text} : 1` : `1 : ${text}`;
}

/** A telescope's name with its aperture, `Cerro Almendra 1.5 m`; once, where the name has it already. */
export function telescopeInWords(name: string, apertureM: number | null): string {
	return apertureM === null || /\d ?m$/.test(name) ? name : `${name} ${apertureM} m`;
}

/** What an alert says about the position, in one phrase. */
export function shapeInWords(shape: Shape): string {
	switch (shape.kind) {
		case 'circle':
			return `circle of ${angleInWords(shape.radiusDeg)} (${percent(shape.containment)})`;
		case 'hardCircle':
			return `circle of ${angleInWords(shape.radiusDeg)}`;
		case 'ellipse':
			return `ellipse of ${angleInWords(shape.semiMajorDeg)} by ${angleInWords(shape.semiMinorDeg)} (${percent(shape.containment)})`;
		case 'annulus':
			return `ring of ${angleInWords(shape.radiusDeg)}, ${angleInWords(shape.halfWidthDeg)} either side (${percent(shape.containment)})`;
		case 'polygon':
			return 'polygon';
		case 'map':
			return 'probability map';
	}
}

function percent(share: number): string {
	return `${Number((share * 100).toFixed(2))} %`;
}

function significant(value: number): string {
	if (value >= 99.5) return String(Math.round(value));
	return value.toPrecision(2);
}
