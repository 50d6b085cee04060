import { answer } from '$lib/server/http/api';
import { transientVoEvent } from '$lib/server/voevent/transientVoEvent';
import type { RequestHandler } from './$types';

/** A transient as a VOEvent 2.0: its joint region in force, or its retraction. */
export const GET: RequestHandler = ({ locals, params }) =>
	answer(async () => {
		const { document } = await transientVoEvent(locals.app, locals.actor, params.designation);
		return new Response(document, {
			headers: {
				'content-type': 'application/voevent+xml; charset=utf-8',
				'content-disposition': `inline; filename="${params.designation}.xml"`,
				'cache-control': 'private, no-cache'
			}
		});
	});
