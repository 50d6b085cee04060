import type { Equatorial } from '../../sky/angle';
import { tileOutlines } from '../../sky/tiling/field';
import { separationDeg } from '../../sky/vector';
import type { Detector } from '../../sky/visibility/telescope';

type Pointing = { centre: Equatorial; rotationDeg: number };

/**
 * What a pointing covers, as STC-S in ICRS (IVOA TAP 1.0, section 6): a circle for one round detector, else a polygon of
 * each detector's corners with great-circle edges; several detectors as a union. Degrees to 1e-6.
 */
export function fieldRegion(pointing: Pointing, detectors: readonly Detector[]): string {
	const outlines = tileOutlines(pointing, detectors);
	const parts = detectors.map((detector, i) => {
		if (detector.shape === 'circle' && detectors.length === 1 && isCentred(detector)) {
			return `Circle ICRS ${pair(pointing.centre)} ${degrees(detector.radiusDeg)}`;
		}
		return `Polygon ICRS ${northThroughEast(outlines[i] ?? [])
			.map(pair)
			.join(' ')}`;
	});
	if (parts.length === 1) return parts[0]!;
	return `Union ICRS (${parts.map((part) => part.replace(' ICRS', '')).join(' ')})`;
}

/** Diameter of the smallest circle about the pointing that holds all detectors, degrees; an upper bound of the field's own. */
export function fieldDiameterDeg(pointing: Pointing, detectors: readonly Detector[]): number {
	const corners = tileOutlines(pointing, detectors).flat();
	return 2 * Math.max(...corners.map((corner) => separationDeg(pointing.centre, corner)));
}

const isCentred = (detector: Detector) => detector.offsetXDeg === 0 && detector.offsetYDeg === 0;
const degrees = (angleDeg: number) => String(Number(angleDeg.toFixed(6)));
const pair = ({ raDeg, decDeg }: Equatorial) => `${degrees(raDeg)} ${degrees(decDeg)}`;

/** IVOA DALI 1.1, section 3.3.7 (from memory): counter-clockwise as seen from the origin, which is north through east. */
function northThroughEast(ring: Equatorial[]): Equatorial[] {
	return [...ring].reverse();
}
