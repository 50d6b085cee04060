import { randomUUID } from 'node:crypto';
import { partnerReportFormSchema } from '$lib/domain/partnerReport';
import { formAction } from '$lib/server/http/formAction';
import { loadPage } from '$lib/server/http/page';
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
	default: (event) =>
		formAction(event, 'reportAsPartner', async (input) => {
			const report = parseInput(partnerReportFormSchema, input);
			await reportAsPartner(event.locals.app, event.locals.actor, report);
			return { reported: report.designation };
		})
};
