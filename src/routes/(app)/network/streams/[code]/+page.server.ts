import { z } from 'zod';
import { streamEditSchema, streamKeyCreateSchema, streamKeyRevokeSchema } from '$lib/domain/stream';
import {
	socketCreateSchema,
	socketRemoveSchema,
	socketSwitchSchema
} from '$lib/domain/streamSocket';
import { formAction } from '$lib/server/http/formAction';
import { loadPage } from '$lib/server/http/page';
import { parseInput } from '$lib/server/http/problem';
import {
	addSocket,
	listSockets,
	removeSocket,
	switchSocket
} from '$lib/server/sockets/socketService';
import { streamHealth } from '$lib/server/streams/streamHealthService';
import { createStreamKey, revokeStreamKey } from '$lib/server/streams/streamKeyService';
import { editStream, retireStream, streamDetail } from '$lib/server/streams/streamService';
import type { Actions, PageServerLoad } from './$types';

const retireSchema = z.object({ retired: z.enum(['yes', 'no']) });

export const load: PageServerLoad = (event) =>
	loadPage(event, async () => {
		const { app, actor } = event.locals;
		return {
			stream: await streamDetail(app, actor, event.params.code),
			sockets: await listSockets(app, actor, event.params.code),
			health: await streamHealth(app, actor, event.params.code),
			alertsAddress: `${app.config.origin}/api/v1/alerts`
		};
	});

export const actions: Actions = {
	save: (event) =>
		formAction(event, 'editStreams', async (input) => {
			const { app, actor } = event.locals;
			await editStream(app, actor, event.params.code, parseInput(streamEditSchema, input));
			return { saved: true };
		}),
	createKey: (event) =>
		formAction(event, 'editStreams', async (input) => {
			const { label } = parseInput(streamKeyCreateSchema, input);
			const { app, actor } = event.locals;
			const made = await createStreamKey(app, actor, { streamCode: event.params.code, label });
			return { newKey: made.key };
		}),
	revokeKey: (event) =>
		formAction(event, 'editStreams', async (input) => {
			await revokeStreamKey(
				event.locals.app,
				event.locals.actor,
				parseInput(streamKeyRevokeSchema, input)
			);
			return { saved: true };
		}),
	addSocket: (event) =>
		formAction(event, 'editStreams', async (input) => {
			const { app, actor } = event.locals;
			await addSocket(app, actor, event.params.code, parseInput(socketCreateSchema, input));
			return { saved: true };
		}),
	switchSocket: (event) =>
		formAction(event, 'editStreams', async (input) => {
			const { socketId, enabled } = parseInput(socketSwitchSchema, input);
			const { app, actor } = event.locals;
			const wanted = { socketId, enabled: enabled === 'yes' };
			await switchSocket(app, actor, event.params.code, wanted);
			return { saved: true };
		}),
	removeSocket: (event) =>
		formAction(event, 'editStreams', async (input) => {
			const { socketId } = parseInput(socketRemoveSchema, input);
			await removeSocket(event.locals.app, event.locals.actor, event.params.code, socketId);
			return { saved: true };
		}),
	retire: (event) =>
		formAction(event, 'editStreams', async (input) => {
			const retired = parseInput(retireSchema, input).retired === 'yes';
			await retireStream(event.locals.app, event.locals.actor, event.params.code, retired);
			return { saved: true };
		})
};
