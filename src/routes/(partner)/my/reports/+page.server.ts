import { randomUUID } from 'node:crypto';
import { partnerReportFormSchema } from '$lib/domain/partnerReport';
import { loadPage, runAction } from '$lib/server/http/page';
import { parseInput } from '$lib/server/http/problem';
import {
	listOwnReports,
	reportableTransients,
	reportAsPartner
} from '$lib/server/partners/partnerReportService';
import type { Actions, PageServerLoad } from './$types';

export const load: PageServerLoad = (event) =>
	loadPage(event, async () => {
		const { app, actor } = event.locals;
		return {
			choices: await reportableTransients(app, actor),
			reports: await listOwnReports(app, actor),
			wanted: event.url.searchParams.get('for') ?? '',
			reportId: randomUUID(),
			now: app.now().toISOString()
		};
	});

export const actions: Actions = {
	default: async ({ request, locals }) => {
		const entered = Object.fromEntries(await request.formData());
		return runAction(async () => {
			const report = parseInput(partnerReportFormSchema, entered);
			await reportAsPartner(locals.app, locals.actor, report);
			return { reported: report.designation };
		});
	}
};
