import type { FadeModel } from '../outlook/outlook';

const HOUR_MS = 3_600_000;
/** Nothing is extrapolated to earlier than this after the trigger. */
const EARLIEST_MS = 30_000;

/**
 * Default fade of optical afterglows, R band, magnitudes: mean 22.2 one hour after the trigger, spread 2.3,
 * α = 1.0. Mean and spread from 71 % brighter than R = 22.1 at 1000 s (Akerlof & Swan 2007, ApJ 671, 1868,
 * arXiv:0709.0962); a later sample is fainter (Wang et al. 2013, arXiv:1307.5939), so the spread stays wide.
 */
export const DEFAULT_FADE: FadeModel = { m1Mean: 22.2, m1Spread: 2.3, alpha: 1 };

/** Mean magnitude at an instant: m(t) = m₁ + 2.5 α log₁₀(t / 1 h); held before 30 s after the trigger. */
export function fadeMag(fade: FadeModel, t0Ms: number, utcMs: number): number {
	const sinceMs = Math.max(utcMs - t0Ms, EARLIEST_MS);
	return fade.m1Mean + 2.5 * fade.alpha * Math.log10(sinceMs / HOUR_MS);
}

/** Chance that the counterpart is brighter than `limitMag` at an instant: Φ((m_lim − m(t)) / spread). */
export function detectChance(
	fade: FadeModel,
	t0Ms: number,
	utcMs: number,
	limitMag: number
): number {
	const margin = limitMag - fadeMag(fade, t0Ms, utcMs);
	if (fade.m1Spread <= 0) return margin > 0 ? 1 : 0;
	return normalCdf(margin / fade.m1Spread);
}

/** Φ(x), |error| below 7.5e-8 (Abramowitz & Stegun 1964, eq. 26.2.17). */
export function normalCdf(x: number): number {
	const t = 1 / (1 + 0.2316419 * Math.abs(x));
	const tail =
		Math.exp((-x * x) / 2) *
		0.3989422804014327 *
		t *
		(0.31938153 + t * (-0.356563782 + t * (1.781477937 + t * (-1.821255978 + t * 1.330274429))));
	return x >= 0 ? 1 - tail : tail;
}
