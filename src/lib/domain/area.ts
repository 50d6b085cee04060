/** Three significant digits, no exponent, no trailing point: `28.3`, `1.21`, `0.0234`, `310`. */
export function significant(value: number, digits = 3): string {
	if (value === 0) return '0';
	const decimals = Math.max(0, digits - 1 - Math.floor(Math.log10(Math.abs(value))));
	return value.toFixed(Math.min(decimals, 12));
}

/** An area on the sky in the unit that reads best: deg², arcmin² below 0.01 deg², arcsec² below 0.05 arcmin². */
export function formatArea(areaDeg2: number): string {
	if (areaDeg2 >= 0.01) return `${significant(areaDeg2)} deg²`;
	const arcmin2 = areaDeg2 * 3600;
	if (arcmin2 >= 0.05) return `${significant(arcmin2)} arcmin²`;
	return `${significant(arcmin2 * 3600)} arcsec²`;
}
