import { DomainError } from '../domainError';
import type { AlertContent } from '../packets/readOutcome';
import type { Placement } from './association';

/** A T0 this far ahead of its receipt is a mistake, not a clock that runs fast. */
const FURTHEST_AHEAD_S = 3600;
/** Less than this is transport and rounding. */
const NOTED_AHEAD_S = 1;
/** Later than this is worth a word: most of the light is gone. */
const NOTED_LATE_H = 24;

/**
 * What T0 and receipt say of the stream's clock. A T0 in the future is taken with a note, up to an hour.
 *
 * @throws DomainError `invalid` when it lies further ahead.
 */
export function clockNotes(t0: Date, receivedAt: Date): string[] {
	const aheadS = (t0.getTime() - receivedAt.getTime()) / 1000;
	if (aheadS > FURTHEST_AHEAD_S) {
		const detail = `lies ${Math.round(aheadS / 60)} minutes after its receipt at ${receivedAt.toISOString()}`;
		throw new DomainError('invalid', `T0 ${detail}.`, [{ pointer: '/t0', detail }]);
	}
	if (aheadS > NOTED_AHEAD_S) {
		return [`T0 is ${aheadS.toFixed(0)} s after its receipt: a clock is wrong`];
	}
	const lateH = -aheadS / 3600;
	return lateH > NOTED_LATE_H ? [`it came ${(lateH / 24).toFixed(1)} days after T0`] : [];
}

/** One sentence for the journal: what came and where it went. */
export function arrivalSummary(
	streamName: string,
	packet: AlertContent,
	placement: Placement
): string {
	const sentence = placed(streamName, packet, placement);
	return placement.overreaches
		? `${sentence}; it asks to replace or retract an alert of another stream, which stands`
		: sentence;
}

function placed(streamName: string, packet: AlertContent, placement: Placement): string {
	const what = `${streamName} ${packet.packetId}, serial ${packet.serial}`;
	if (packet.kind === 'retraction') return `${what}: retraction`;
	const odds =
		placement.logOdds === null ? '' : ` at odds of ${formatOdds(placement.logOdds)} for one source`;
	if (placement.membership === 'provisional' && placement.withdrawn.length > 0) {
		return `${what}: replaces a position that it does not agree with (${formatOdds(placement.logOdds!)}); somebody should look`;
	}
	const ways: Record<Placement['membership'], string> = {
		started: 'started this transient',
		joined: `joined${odds}`,
		provisional: `joined provisionally${odds}; somebody should look`,
		cited: 'belongs to a packet that is here',
		moved: 'was moved here'
	};
	return `${what}: ${ways[placement.membership]}${placement.live ? '' : '; already replaced'}`;
}

function formatOdds(logOdds: number): string {
	if (logOdds >= 0)
		return logOdds > 13.8
			? 'over 1,000,000 : 1'
			: `${Number(Math.exp(logOdds).toPrecision(2))} : 1`;
	return logOdds < -13.8
		? 'less than 1 : 1,000,000'
		: `1 : ${Number(Math.exp(-logOdds).toPrecision(2))}`;
}
