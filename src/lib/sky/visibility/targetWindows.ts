import { RAD_PER_DEG } from '../angle';
import {
	localSiderealRad,
	moonAltitudeDeg,
	moonDistanceDeg,
	moonPhase,
	sunAltitudeDeg,
	sunDistanceDeg,
	targetHorizontal,
	type SiteSky,
	type SkyTarget
} from './siteSky';
import type { LimitName, TelescopeSpec, Window } from './telescope';
import { horizonAltDeg, knotTimesMs } from './horizonMask';
import {
	cutWindow,
	intersectWindows,
	tidyWindows,
	uniteWindows,
	wholeSpan,
	windowsWhere,
	withoutWindows
} from './windows';

const FULL_TURN_RAD = 2 * Math.PI;

/** What of a telescope decides where and when it may point. */
export type Pointing = Pick<TelescopeSpec, 'site' | 'limits' | 'closures'>;

/**
 * How the Moon limit works: `scaled` by the illuminated fraction and off while the Moon is below the
 * horizon (a telescope's limits), or the `plain` angle at all times.
 */
export type MoonRule = 'scaled' | 'plain';

/** A telescope's span with the parts of its windows that do not depend on the target. */
export type TelescopeNights = {
	pointing: Pointing;
	sky: SiteSky;
	startMs: number;
	endMs: number;
	moonRule: MoonRule;
	/** Dark and not closed. */
	nights: Window[];
	/** Times at which the Moon is up (centre above the geometric horizon). */
	moonUp: Window[];
};

/** Prepares a telescope between two instants of its sky's span. */
export function telescopeNights(
	pointing: Pointing,
	sky: SiteSky,
	startMs: number,
	endMs: number,
	moonRule: MoonRule = 'scaled'
): TelescopeNights {
	const { span } = sky.shared;
	if (!(startMs < endMs && startMs >= span.startMs && endMs <= span.endMs)) {
		throw new RangeError(
			`startMs ${startMs} and endMs ${endMs} must lie in order within ${span.startMs} to ${span.endMs}`
		);
	}
	const { sunAltMaxDeg } = pointing.limits;
	const dark = cutWindow(
		wholeSpan(span.startMs, span.endMs)[0]!,
		(utcMs) => sunAltMaxDeg - sunAltitudeDeg(sky, utcMs),
		sky.shared.timesMs,
		sky.sunAltDeg.map((altDeg) => sunAltMaxDeg - altDeg),
		'sun'
	);
	return {
		pointing,
		sky,
		startMs,
		endMs,
		moonRule,
		nights: intersectWindows(
			intersectWindows(wholeSpan(startMs, endMs), dark),
			closureWindows(pointing, startMs, endMs)
		),
		moonUp: cutWindow(
			wholeSpan(span.startMs, span.endMs)[0]!,
			(utcMs) => moonAltitudeDeg(sky, utcMs),
			sky.shared.timesMs,
			sky.moonAltDeg,
			'moon'
		)
	};
}

/** Windows of one target, in order, inside all of the telescope's limits; empty when it is never up. */
export function targetWindows(telescope: TelescopeNights, target: SkyTarget): Window[] {
	const { limits } = telescope.pointing;
	const { decDeg } = target.position;
	if (telescope.nights.length === 0) return [];
	if (limits.decMinDeg !== null && decDeg < limits.decMinDeg) return [];
	if (limits.decMaxDeg !== null && decDeg > limits.decMaxDeg) return [];
	let windows = intersectWindows(
		telescope.nights,
		altitudeWindows(telescope, target, limits.minAltDeg, 'altitude')
	);
	if (limits.maxAltDeg !== null && windows.length > 0) {
		windows = intersectWindows(
			windows,
			withoutWindows(
				altitudeWindows(telescope, target, limits.maxAltDeg, 'zenith'),
				'zenith',
				telescope.startMs,
				telescope.endMs
			)
		);
	}
	if (limits.hourAngleMaxH !== null && windows.length > 0) {
		const halfWidthRad = limits.hourAngleMaxH * 15 * RAD_PER_DEG;
		windows = intersectWindows(
			windows,
			hourAngleWindows(telescope, target, halfWidthRad, 'hourAngle')
		);
	}
	if (windows.length > 0) windows = cutBySun(telescope, target, windows);
	if (windows.length > 0) windows = cutByMoon(telescope, target, windows);
	const { horizon } = limits;
	if (horizon !== null && horizon.length > 0 && windows.length > 0) {
		const knots = knotTimesMs(
			telescope.sky,
			target,
			horizon,
			windows[0]!.startMs,
			windows.at(-1)!.endMs
		);
		windows = windowsWhere(
			windows,
			(utcMs) => {
				const { altDeg, azDeg } = targetHorizontal(telescope.sky, target, utcMs);
				return altDeg - horizonAltDeg(horizon, azDeg);
			},
			knots,
			'horizon'
		);
	}
	return tidyWindows(windows);
}

/** Limit at which the Moon's distance binds, degrees. */
export function moonLimitDeg(telescope: TelescopeNights, utcMs: number): number {
	const full = telescope.pointing.limits.moonDistanceDeg;
	return telescope.moonRule === 'plain'
		? full
		: full * moonPhase(telescope.sky.shared, utcMs).fraction;
}

function closureWindows(pointing: Pointing, startMs: number, endMs: number): Window[] {
	const blocked = uniteWindows([
		pointing.closures
			.filter((closure) => closure.endMs > closure.startMs)
			.map(({ startMs: from, endMs: to }) => ({
				startMs: from,
				endMs: to,
				opensBy: 'closure',
				endsBy: 'closure'
			}))
	]);
	return withoutWindows(blocked, 'closure', startMs, endMs);
}

/** Times at which the target's altitude is above `altDeg`: in closed form, as its place is held over the span. */
function altitudeWindows(
	telescope: TelescopeNights,
	target: SkyTarget,
	altDeg: number,
	limit: LimitName
): Window[] {
	const { sinLat, cosLat } = telescope.sky.frame;
	const mean = sinLat * target.sinDec;
	const swing = cosLat * target.cosDec;
	const short = Math.sin(altDeg * RAD_PER_DEG) - mean;
	if (short < -swing) return wholeSpan(telescope.startMs, telescope.endMs);
	if (short >= swing) return [];
	return hourAngleWindows(telescope, target, Math.acos(short / swing), limit);
}

/** Times at which the target is within `halfWidthRad` of the meridian. */
function hourAngleWindows(
	telescope: TelescopeNights,
	target: SkyTarget,
	halfWidthRad: number,
	limit: LimitName
): Window[] {
	const { startMs, endMs, sky } = telescope;
	if (halfWidthRad >= Math.PI) return wholeSpan(startMs, endMs);
	const rate = sky.shared.span.gastRadPerMs;
	const startRad = localSiderealRad(sky, startMs) - target.raRad;
	const windows: Window[] = [];
	for (let turn = Math.ceil((startRad - halfWidthRad) / FULL_TURN_RAD); ; turn += 1) {
		const transitMs = startMs + (turn * FULL_TURN_RAD - startRad) / rate;
		const riseMs = transitMs - halfWidthRad / rate;
		const setMs = transitMs + halfWidthRad / rate;
		if (riseMs >= endMs) return windows;
		windows.push({
			startMs: Math.max(riseMs, startMs),
			endMs: Math.min(setMs, endMs),
			opensBy: riseMs > startMs ? limit : 'start',
			endsBy: setMs < endMs ? limit : 'end'
		});
	}
}

function cutBySun(telescope: TelescopeNights, target: SkyTarget, windows: Window[]): Window[] {
	const leastDeg = telescope.pointing.limits.sunDistanceDeg;
	if (target.leastSunDeg > leastDeg) return windows;
	const { sky } = telescope;
	return windowsWhere(
		windows,
		(utcMs) => sunDistanceDeg(sky, target, utcMs) - leastDeg,
		sky.shared.timesMs,
		'sunDistance'
	);
}

function cutByMoon(telescope: TelescopeNights, target: SkyTarget, windows: Window[]): Window[] {
	const { sky, moonUp, moonRule, startMs, endMs } = telescope;
	const fullDeg = telescope.pointing.limits.moonDistanceDeg;
	if (fullDeg <= 0 || target.leastMoonDeg > fullDeg) return windows;
	const shining = moonRule === 'plain' ? windows : intersectWindows(windows, moonUp);
	const near = windowsWhere(
		shining,
		(utcMs) => moonLimitDeg(telescope, utcMs) - moonDistanceDeg(sky, target, utcMs),
		sky.shared.timesMs,
		'moon'
	);
	return near.length === 0
		? windows
		: intersectWindows(windows, withoutWindows(near, 'moon', startMs, endMs));
}
