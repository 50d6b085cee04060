import { answer } from '$lib/server/http/api';
import { outlookTable } from '$lib/server/export/outlookTable';
import { tableAnswer } from '$lib/server/export/tableAnswer';
import { transientDetail } from '$lib/server/transients/transientDetail';
import type { RequestHandler } from './$types';

/** The ranked outlook as a file. */
export const GET: RequestHandler = ({ locals, params }) =>
	answer(async () => {
		const detail = await transientDetail(locals.app, locals.actor, params.designation);
		return tableAnswer(outlookTable(detail), 'vot', `${params.designation}-outlook`);
	});
