import type { ResponseQuery, ResponseTables } from '../../domain/response';
import { requirePermission, type Actor } from '../actor';
import type { App } from '../app';
import {
	ALL_STEPS,
	TELESCOPE_STEPS,
	responseDifferences,
	responseRows,
	waitingCurve,
	type ResponseGroup
} from './responseSummary';
import {
	milestonesOf,
	streamOf,
	telescopeMilestones,
	telescopesOf,
	type ResponseStory
} from './responseStory';
import { readResponseStories, readStreamNames, readTelescopeNames } from './responseStore';

const DAY_MS = 86_400_000;

/** How fast the team answered in the last `days`, from the journal: all together, by telescope or by stream. */
export async function responseTables(
	app: App,
	actor: Actor | null,
	{ days, by }: ResponseQuery
): Promise<ResponseTables> {
	requirePermission(actor, 'viewResponse');
	const to = app.now();
	const from = new Date(to.getTime() - days * DAY_MS);
	const stories = await readResponseStories(app.database, from, to);
	const all = stories.map(milestonesOf);
	const steps = by === 'telescope' ? TELESCOPE_STEPS : ALL_STEPS;
	const groups = by
		? await groupsBy(app, by, stories)
		: [{ label: null, milestones: all } satisfies ResponseGroup];
	return {
		days,
		from: from.toISOString(),
		to: to.toISOString(),
		transients: all.length,
		by: by ?? null,
		rows: responseRows(groups, steps, to.getTime()),
		differences: responseDifferences(groups, steps, to.getTime()),
		curve: waitingCurve(all, to.getTime())
	};
}

async function groupsBy(
	app: App,
	by: 'telescope' | 'stream',
	stories: ResponseStory[]
): Promise<ResponseGroup[]> {
	const names =
		by === 'telescope'
			? await readTelescopeNames(app.database)
			: await readStreamNames(app.database);
	const groups = new Map<string, ResponseGroup>();
	for (const story of stories) {
		const keys = by === 'telescope' ? telescopesOf(story) : [streamOf(story) ?? ''];
		for (const key of keys) {
			let group = groups.get(key);
			if (!group) {
				groups.set(key, (group = { label: names.get(key) ?? 'Unknown', milestones: [] }));
			}
			group.milestones.push(
				by === 'telescope' ? telescopeMilestones(story, key) : milestonesOf(story)
			);
		}
	}
	return [...groups.values()].sort((a, b) => (a.label ?? '').localeCompare(b.label ?? '', 'en'));
}
