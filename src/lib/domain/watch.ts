import { z } from 'zod';
import { formInstant } from './formFields';

const LONGEST_WATCH_H = 24;
const HOUR_MS = 3_600_000;

/** A watch as a steward enters it; times are UTC. */
export const watchSchema = z
	.strictObject({
		id: z.uuid().optional(),
		startAt: formInstant,
		endAt: formInstant,
		firstPersonId: z.uuid('Choose who is first.'),
		secondPersonId: z.union([z.uuid(), z.literal('').transform(() => null), z.null()]).default(null)
	})
	.refine((watch) => Date.parse(watch.endAt) > Date.parse(watch.startAt), {
		path: ['endAt'],
		error: 'The end must be after the start.'
	})
	.refine(
		(watch) => Date.parse(watch.endAt) - Date.parse(watch.startAt) <= LONGEST_WATCH_H * HOUR_MS,
		{ path: ['endAt'], error: `A watch lasts ${LONGEST_WATCH_H} hours at most.` }
	)
	.refine((watch) => watch.secondPersonId !== watch.firstPersonId, {
		path: ['secondPersonId'],
		error: 'The second must be somebody else.'
	});
export type WatchInput = z.output<typeof watchSchema>;

export type Span = { startMs: number; endMs: number };

/** The stretches of `span` that none of the spans covers, in order; the spans need no order. */
export function gapsIn(span: Span, covered: readonly Span[]): Span[] {
	const gaps: Span[] = [];
	let fromMs = span.startMs;
	for (const { startMs, endMs } of [...covered].sort((a, b) => a.startMs - b.startMs)) {
		if (startMs > fromMs) gaps.push({ startMs: fromMs, endMs: Math.min(startMs, span.endMs) });
		fromMs = Math.max(fromMs, endMs);
		if (fromMs >= span.endMs) break;
	}
	if (fromMs < span.endMs) gaps.push({ startMs: fromMs, endMs: span.endMs });
	return gaps.filter((gap) => gap.endMs > gap.startMs);
}
