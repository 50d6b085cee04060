import { z } from 'zod';
import { instantSchema } from './alertPacket';

/** A number typed into a form; an empty box is refused by its own sentence. */
export function formNumber(low: number, high: number, unit = ''): z.ZodType<number> {
	const range = `Must be a number from ${low} to ${high}${unit ? ` ${unit}` : ''}.`;
	return z
		.union([z.number(), z.string().trim().min(1, 'A number is needed.').transform(Number)], {
			error: 'A number is needed.'
		})
		.pipe(z.number(range).min(low, range).max(high, range));
}

const withoutZone = /^\d{4}-\d{2}-\d{2}[T ]\d{2}:\d{2}(:\d{2})?$/;

/** A UTC instant: as the API sends it, or as a date-and-time box gives it, without a zone. */
export const formInstant = z
	.string('A date and time is needed.')
	.min(1, 'A date and time is needed.')
	.transform((text) =>
		withoutZone.test(text) ? `${text.slice(0, 16).replace(' ', 'T')}:00Z` : text
	)
	.pipe(instantSchema);
