import { and, eq, isNull, sql } from 'drizzle-orm';
import type { Channel } from '../../domain/vocabulary';
import type { Executor } from '../db/database';
import { alert, stream } from '../db/schema/alerts';
import { pushDevice, subscription } from '../db/schema/circulars';
import { person } from '../db/schema/people';

export type Recipient = { personId: string; channel: Channel };

/**
 * Who asked for circulars on this transient, by channel. A stream filter matches when any of the
 * transient's alerts came from one of its streams; push needs a device that has allowed it.
 */
export async function recipientsOf(
	executor: Executor,
	transientId: string,
	pushAvailable: boolean
): Promise<Recipient[]> {
	const wanted = sql`(cardinality(${subscription.streamCodes}) = 0 or exists (
		select 1 from ${alert} join ${stream} on ${stream.id} = ${alert.streamId}
		where ${alert.transientId} = ${transientId} and ${stream.code} = any(${subscription.streamCodes})
	))`;
	const hasDevice = sql<boolean>`exists (
		select 1 from ${pushDevice} where ${pushDevice.personId} = ${subscription.personId}
	)`;
	const rows = await executor
		.select({
			personId: subscription.personId,
			byEmail: subscription.byEmail,
			byPush: subscription.byPush,
			hasDevice
		})
		.from(subscription)
		.innerJoin(person, eq(person.id, subscription.personId))
		.where(and(isNull(person.disabledAt), wanted))
		.orderBy(person.name, person.id);
	return rows.flatMap(({ personId, byEmail, byPush, hasDevice }) => [
		...(byEmail ? [{ personId, channel: 'email' as const }] : []),
		...(byPush && hasDevice && pushAvailable ? [{ personId, channel: 'push' as const }] : [])
	]);
}
