import { z } from 'zod';
import { DESIGNATION_EXAMPLE, ID_EXAMPLE } from '../../domain/answers/exampleValues';
import type { Answer, Named } from './operation';

/** A JSON answer. */
export function json(status: number, says: string, content: Named, example?: unknown): Answer {
	return {
		status,
		says,
		mediaType: 'application/json',
		content,
		...(example === undefined ? {} : { examples: { example } })
	};
}

/** A file to keep. */
export function file(mediaType: string, says: string): Answer {
	return { status: 200, says, mediaType };
}

export const csvFile = (says: string) => file('text/csv', says);
export const votableFile = (says: string) => file('application/x-votable+xml', says);

const designationOnly = {
	name: 'DesignationOnly',
	schema: z.object({ designation: z.string() })
};

export function movedTo(says: string): Answer {
	return json(200, says, designationOnly, { designation: DESIGNATION_EXAMPLE });
}

const slotOnly = { name: 'SlotOnly', schema: z.object({ slotId: z.uuid() }) };

export function slotAnswer(status: number, says: string): Answer {
	return json(status, says, slotOnly, { slotId: ID_EXAMPLE });
}

const reportOnly = { name: 'ReportOnly', schema: z.object({ reportId: z.uuid() }) };

export function reportAnswer(status: number, says: string): Answer {
	return json(status, says, reportOnly, { reportId: ID_EXAMPLE });
}
