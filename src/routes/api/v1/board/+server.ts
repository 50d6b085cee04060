import { boardTextFor } from '$lib/server/transients/board';
import { currentRevision } from '$lib/server/db/boardRevisions';
import { requirePermission } from '$lib/server/actor';
import { answer } from '$lib/server/http/api';
import { matchesEtag } from '$lib/server/http/etag';
import type { RequestHandler } from './$types';

/** The board; 304 when nothing changed since the revision in If-None-Match. `?since=` narrows it. */
export const GET: RequestHandler = ({ locals, request, url }) =>
	answer(async () => {
		requirePermission(locals.actor, 'viewBoard');
		const revision = await currentRevision(locals.app);
		const headers = (value: number) => ({
			etag: `"${value}"`,
			'cache-control': 'private, no-cache',
			vary: 'Cookie'
		});
		if (matchesEtag(request.headers.get('if-none-match'), `"${revision}"`)) {
			return new Response(null, { status: 304, headers: headers(revision) });
		}
		const since = Number(url.searchParams.get('since') ?? 0);
		const { text, revision: made } = await boardTextFor(
			locals.app,
			locals.actor,
			Number.isSafeInteger(since) ? since : 0
		);
		return new Response(text, {
			headers: { ...headers(made), 'content-type': 'application/json' }
		});
	});
