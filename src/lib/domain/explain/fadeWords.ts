import type { BoardOutlook } from '../board';
import type { Explanation } from './explanation';

export const fadeAssumptions = [
	'The counterpart fades as a power of the time since the trigger; its brightness at one hour is Gaussian in magnitudes.'
];

/** The fade that an outlook assumes, in words. */
export function fadeStep({ fade }: Pick<BoardOutlook, 'fade'>): Explanation['steps'][number] {
	if (!fade) return { label: 'Fade', text: 'that of the stream that heard it first' };
	return {
		label: 'Fade',
		text: `R ${fade.m1Mean.toFixed(1)} ± ${fade.m1Spread.toFixed(1)} mag one hour after the trigger, fading with α = ${fade.alpha.toFixed(1)} (2.5 α mag per factor of ten in time); set for ${fade.streamName} under Network`
	};
}
