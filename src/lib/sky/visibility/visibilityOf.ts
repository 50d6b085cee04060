import type { Equatorial } from '../angle';
import { forbiddenBy } from './forbiddenBy';
import { sharedSky, siteSky, skyTarget, type SkyTarget } from './siteSky';
import {
	targetWindows,
	telescopeNights,
	type MoonRule,
	type Pointing,
	type TelescopeNights
} from './targetWindows';
import type { Visibility } from './telescope';

const EDGE_MS = 1;

/** Windows of a prepared target, or the limit that forbids it. */
export function visibilityOf(telescope: TelescopeNights, target: SkyTarget): Visibility {
	const windows = targetWindows(telescope, target);
	const [first] = windows;
	if (!first) {
		return { verdict: 'neverUp', windows: [], forbidden: forbiddenBy(telescope, target) };
	}
	const whole =
		first.startMs - telescope.startMs < EDGE_MS && telescope.endMs - first.endMs < EDGE_MS;
	return whole ? { verdict: 'alwaysUp', windows: [first] } : { verdict: 'windows', windows };
}

/**
 * When a telescope can point at an ICRS position between two instants (at most 96 h apart), inside all its
 * limits; altitudes are geometric (no refraction). Edges to 1 s, and to 2.5 s of astropy below 60° latitude
 * where Sun or target set them, 30 s where the Moon does. For many telescopes and positions
 * share `sharedSky`, `siteSky` and `telescopeNights`.
 */
export function visibilityBetween(
	telescope: Pointing,
	position: Equatorial,
	startMs: number,
	endMs: number,
	moonRule: MoonRule = 'scaled'
): Visibility {
	const shared = sharedSky(startMs, endMs);
	const sky = siteSky(telescope.site, shared);
	const prepared = telescopeNights(telescope, sky, startMs, endMs, moonRule);
	return visibilityOf(prepared, skyTarget(position, shared));
}
