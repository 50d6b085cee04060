import type { Strip } from '../../sky/outlook/outlook';
import { stripShare, stripSpanMs } from './stripGeometry';

const SIX_HOURS_MS = 6 * 3_600_000;
/** Of the axis' figures, at their size of 11 px. */
const CHARACTER_PX = 6.8;
const GAP_PX = 6;
const START = '06:00'.length * CHARACTER_PX;
const END = '06:00 UTC'.length * CHARACTER_PX;
const HALF_MARK = ('06'.length * CHARACTER_PX) / 2;

/** The six-hour marks that fit between the labels of both ends and do not touch them. */
export function axisMarks(strip: Strip, widthPx: number): { atMs: number; share: number }[] {
	const endMs = strip.startMs + stripSpanMs(strip);
	const list: { atMs: number; share: number }[] = [];
	let freeFromPx = START + GAP_PX;
	for (
		let atMs = Math.ceil(strip.startMs / SIX_HOURS_MS) * SIX_HOURS_MS;
		atMs < endMs;
		atMs += SIX_HOURS_MS
	) {
		const share = stripShare(strip, atMs);
		const middlePx = share * widthPx;
		if (middlePx - HALF_MARK < freeFromPx) continue;
		if (middlePx + HALF_MARK > widthPx - END - GAP_PX) break;
		list.push({ atMs, share });
		freeFromPx = middlePx + HALF_MARK + GAP_PX;
	}
	return list;
}
