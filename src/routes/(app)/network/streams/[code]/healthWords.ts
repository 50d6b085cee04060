/** A lag in the unit that suits it: `12 s`, `4.5 min`, `2.1 h`; a clock ahead gives less than nothing. */
export function lagText(lagS: number): string {
	const sign = lagS < 0 ? '−' : '';
	const size = Math.abs(lagS);
	const figure = (value: number) => `${sign}${Number(value.toPrecision(2))}`;
	if (size < 99.5) return `${figure(size)} s`;
	if (size < 5940) return `${figure(size / 60)} min`;
	return size < 172_800 ? `${figure(size / 3600)} h` : `${figure(size / 86_400)} d`;
}

/** A day of a month without more: `2026-12-01` is `1`. */
export function shortDay(day: string): string {
	return String(Number(day.slice(8)));
}
