import { and, asc, isNull, sql, type SQL } from 'drizzle-orm';
import type { App } from '../app';
import { stream } from '../db/schema/alerts';
import { person } from '../db/schema/people';
import { writeTransaction } from '../db/writeTransaction';
import { tellPerson } from '../notify/tellPerson';

/** Streams in service that were not heard, or not since they were added, for longer than they should be. */
export function isSilent(now: Date): SQL | undefined {
	return and(
		isNull(stream.retiredAt),
		sql`coalesce(${stream.lastHeardAt}, ${stream.createdAt})
			+ ${stream.silentAfterMinutes} * interval '1 minute' < ${now.toISOString()}::timestamptz`
	);
}

/**
 * Tells every steward, once a silence, of each stream that is silent for longer than it should be. The row is
 * claimed and the messages queued in one transaction, so that two workers tell once between them.
 */
export async function tellOfSilentStreams(app: App): Promise<number> {
	const now = app.now();
	return writeTransaction(app, async (tx) => {
		const silent = await tx
			.update(stream)
			.set({ silenceNotedAt: now })
			.where(and(isSilent(now), isNull(stream.silenceNotedAt)))
			.returning();
		if (silent.length === 0) return 0;
		const stewards = await tx
			.select({ id: person.id })
			.from(person)
			.where(and(isNull(person.disabledAt), sql`'steward' = any(${person.roles})`))
			.orderBy(asc(person.id));
		for (const { code, name, lastHeardAt, createdAt, silentAfterMinutes } of silent) {
			const since = lastHeardAt ?? createdAt;
			for (const { id } of stewards) {
				await tellPerson(app, tx, {
					personId: id,
					subject: `${name} is silent`,
					paragraphs: [
						lastHeardAt
							? `${name} was last heard at ${minuteText(lastHeardAt)}, longer ago than its ${spanText(silentAfterMinutes)}.`
							: `${name} has not been heard since it was added at ${minuteText(createdAt)}.`,
						'See whether its sender runs and its keys are right. You are told once; it is over when the stream is heard.'
					],
					path: `/network/streams/${code}`,
					key: `silent.${code}.${Math.floor(+since / 1000)}`
				});
			}
		}
		return silent.length;
	});
}

const minuteText = (at: Date) => `${at.toISOString().slice(0, 16).replace('T', ' ')} UTC`;

function spanText(minutes: number): string {
	if (minutes < 120) return `${minutes} minutes`;
	return minutes < 2880
		? `${Number((minutes / 60).toFixed(1))} hours`
		: `${Number((minutes / 1440).toFixed(1))} days`;
}
