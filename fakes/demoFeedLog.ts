import type { AlertPacket } from '../src/lib/domain/alertPacket';

/** A packet's circle in words for the feed's log, with a leading comma; empty without a circle. */
export function formatPosition({ shape }: AlertPacket): string {
	if (shape?.kind !== 'circle') return '';
	const { centre, radiusDeg } = shape;
	const digits = radiusDeg < 0.01 ? 4 : 2;
	const sign = centre.decDeg < 0 ? '−' : '+';
	const position = `RA ${centre.raDeg.toFixed(digits)}° Dec ${sign}${Math.abs(centre.decDeg).toFixed(digits)}°`;
	return `, ${formatRadius(radiusDeg)} about ${position}`;
}

function formatRadius(radiusDeg: number): string {
	if (radiusDeg >= 0.5) return `${radiusDeg.toFixed(1)}°`;
	if (radiusDeg >= 1 / 120) return `${(radiusDeg * 60).toFixed(1)}′`;
	return `${(radiusDeg * 3600).toFixed(1)}″`;
}
