import type { SlotState } from './vocabulary';

/** Which states may follow which. */
export const SLOT_TRANSITIONS: Record<SlotState, readonly SlotState[]> = {
	offered: ['claimed', 'lapsed'],
	claimed: ['on sky', 'reported', 'released', 'lapsed'],
	'on sky': ['reported', 'released'],
	reported: [],
	released: [],
	lapsed: []
};

export function slotMayBecome(from: SlotState, to: SlotState): boolean {
	return SLOT_TRANSITIONS[from].includes(to);
}
