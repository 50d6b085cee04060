import { z } from 'zod';
import { circularDetail } from '$lib/server/circulars/circularService';
import { retryDelivery } from '$lib/server/circulars/deliveryLedgerService';
import { formAction } from '$lib/server/http/formAction';
import { loadPage } from '$lib/server/http/page';
import { parseInput } from '$lib/server/http/problem';
import type { Actions, PageServerLoad } from './$types';

export const load: PageServerLoad = (event) =>
	loadPage(event, async () => ({
		circular: await circularDetail(
			event.locals.app,
			event.locals.actor,
			Number(event.params.number)
		)
	}));

const retrySchema = z.object({ deliveryId: z.uuid() });

export const actions: Actions = {
	retry: (event) =>
		formAction(event, 'retryDelivery', async (input) => {
			const { deliveryId } = parseInput(retrySchema, input);
			await retryDelivery(event.locals.app, event.locals.actor, deliveryId);
			return { retried: deliveryId };
		})
};
