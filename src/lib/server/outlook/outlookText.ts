import { computeOutlook } from '../../sky/outlook/computeOutlook';
import type { Outlook, OutlookInput } from '../../sky/outlook/outlook';

/** An outlook as JSON text, with the figures that are stored beside it. */
export type OutlookText = Pick<Outlook, 'computedMs' | 'networkCatch' | 'costOfWaitingPoints'> & {
	text: string;
};

/** Computes an outlook and writes it as JSON: one text leaves a thread sooner than ten thousand objects. */
export function outlookText(input: OutlookInput): OutlookText {
	const outlook = computeOutlook(input);
	const { computedMs, networkCatch, costOfWaitingPoints } = outlook;
	return { computedMs, networkCatch, costOfWaitingPoints, text: JSON.stringify(outlook) };
}
