import { and, asc, eq, gte, inArray, lte, sql } from 'drizzle-orm';
import type { Executor } from '../db/database';
import { stream } from '../db/schema/alerts';
import { telescope } from '../db/schema/network';
import { journal, transient } from '../db/schema/transients';
import { RESPONSE_KINDS, type ResponseStory } from './responseStory';

/** The stories of the transients with T0 between the two instants; tests and drills are left out. */
export async function readResponseStories(
	executor: Executor,
	from: Date,
	to: Date
): Promise<ResponseStory[]> {
	const text = (key: string) => sql<string | null>`${journal.detail} ->> ${sql.raw(`'${key}'`)}`;
	const rows = await executor
		.select({
			id: transient.id,
			t0: transient.t0,
			kind: journal.kind,
			at: journal.at,
			decision: text('decision'),
			stream: text('stream'),
			telescopeId: text('telescopeId'),
			byPartner: sql<boolean>`coalesce(${journal.detail} ->> 'partner', '') = 'true'`
		})
		.from(transient)
		.innerJoin(journal, eq(journal.transientId, transient.id))
		.where(
			and(
				gte(transient.t0, from),
				lte(transient.t0, to),
				eq(transient.isTest, false),
				eq(transient.isDrill, false),
				inArray(journal.kind, [...RESPONSE_KINDS]),
				lte(journal.at, to)
			)
		)
		.orderBy(asc(transient.t0), asc(transient.id), asc(journal.at), asc(journal.id));
	const stories = new Map<string, ResponseStory>();
	for (const { id, t0, at, ...entry } of rows) {
		let story = stories.get(id);
		if (!story) stories.set(id, (story = { t0Ms: t0.getTime(), entries: [] }));
		story.entries.push({ ...entry, atMs: at.getTime() });
	}
	return [...stories.values()];
}

export async function readTelescopeNames(executor: Executor): Promise<Map<string, string>> {
	const rows = await executor.select({ id: telescope.id, name: telescope.name }).from(telescope);
	return new Map(rows.map(({ id, name }) => [id, name]));
}

export async function readStreamNames(executor: Executor): Promise<Map<string, string>> {
	const rows = await executor.select({ code: stream.code, name: stream.name }).from(stream);
	return new Map(rows.map(({ code, name }) => [code, name]));
}
