import type {
	BoardOutlookRow,
	BoardSlot,
	BoardTelescope,
	BoardTransient
} from '../../domain/board';
import { HOLDING_SLOT_STATES } from '../../domain/vocabulary';
import { formatUtc } from '../format/formatTime';
import { altitudeAt, stripSpanMs } from './stripGeometry';

/** Slots that hold the telescope and touch the strip, in order. */
export function heldSlots(
	slots: readonly BoardSlot[],
	telescopeCode: string,
	strip: BoardOutlookRow['strip']
): BoardSlot[] {
	const endMs = strip.startMs + stripSpanMs(strip);
	const holding: readonly string[] = HOLDING_SLOT_STATES;
	return slots
		.filter(
			(slot) =>
				slot.telescopeCode === telescopeCode &&
				holding.includes(slot.state) &&
				Date.parse(slot.endAt) > strip.startMs &&
				Date.parse(slot.startAt) < endMs
		)
		.sort((a, b) => a.startAt.localeCompare(b.startAt));
}

/** The transient's own slots, and those that hold the telescope for another transient. */
export function slotsOnTelescope(
	transient: Pick<BoardTransient, 'designation' | 'slots'>,
	telescope: Pick<BoardTelescope, 'holds'> | undefined
): BoardSlot[] {
	const elsewhere = telescope?.holds.filter((hold) => hold.designation !== transient.designation);
	return [...transient.slots, ...(elsewhere ?? [])];
}

/** A strip in words: when the target is usable and how high, and who has which time. */
export function stripText(name: string, row: BoardOutlookRow, slots: readonly BoardSlot[]): string {
	const usable = row.windows.map(({ startAt, endAt }) => {
		const span = `${formatUtc(startAt, 'short')} to ${formatUtc(endAt, 'short')}`;
		const altitudes = [startAt, endAt]
			.map((instant) => altitudeAt(row.strip, Date.parse(instant)))
			.filter((altDeg) => altDeg !== null)
			.map((altDeg) => `${Math.round(altDeg)}°`);
		return altitudes.length === 2 ? `${span} (altitude ${altitudes.join(' to ')})` : span;
	});
	const claims = slots.map(
		({ claimedBy, startAt, endAt }) =>
			`${claimedBy?.name ?? 'somebody'} ${formatUtc(startAt, 'short')} to ${formatUtc(endAt, 'short')}`
	);
	return [
		`${name}: `,
		usable.length > 0
			? `usable ${usable.join(', ')} UTC.`
			: `not usable in these 24 hours${row.whyNot ? `: ${row.whyNot}` : ''}.`,
		claims.length > 0 ? ` Claimed by ${claims.join(', ')} UTC.` : ''
	].join('');
}
