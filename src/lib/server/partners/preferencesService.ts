import { eq, isNull } from 'drizzle-orm';
import type { Preferences, PreferencesView } from '../../domain/preferences';
import { requirePermission, type Actor } from '../actor';
import type { App } from '../app';
import type { Executor } from '../db/database';
import { stream } from '../db/schema/alerts';
import { subscription } from '../db/schema/circulars';
import { telescope } from '../db/schema/network';
import { DomainError, type FieldError } from '../domainError';
import { readPushDevices } from '../notify/pushDeviceStore';

/** What somebody gets, and what they could choose. Nobody gets anything before they asked. */
export async function preferencesView(app: App, actor: Actor | null): Promise<PreferencesView> {
	requirePermission(actor, 'setPreferences');
	return {
		preferences: await readPreferences(app.database, actor.id),
		streams: await readStreams(app.database),
		telescopes: await readTelescopes(app.database),
		pushKey: app.config.vapid?.publicKey ?? null,
		devices: await readPushDevices(app.database, actor.id)
	};
}

export async function savePreferences(
	app: App,
	actor: Actor | null,
	input: Preferences
): Promise<void> {
	requirePermission(actor, 'setPreferences');
	await app.database.transaction(async (tx) => {
		const errors: FieldError[] = [];
		const streams = await readStreams(tx);
		if (!input.streamCodes.every((code) => streams.some((known) => known.code === code))) {
			errors.push({ pointer: '/streamCodes', detail: 'must be streams of this installation' });
		}
		const [chosen] = input.telescopeCode
			? await tx
					.select({ id: telescope.id })
					.from(telescope)
					.where(eq(telescope.code, input.telescopeCode))
			: [];
		if (input.telescopeCode && !chosen) {
			errors.push({ pointer: '/telescopeCode', detail: 'must be a telescope of the network' });
		}
		if (errors.length > 0) throw new DomainError('invalid', 'Some fields are not valid.', errors);
		const values = {
			byEmail: input.byEmail,
			byPush: input.byPush,
			streamCodes: [...new Set(input.streamCodes)].sort(),
			telescopeId: chosen?.id ?? null,
			updatedAt: app.now()
		};
		await tx
			.insert(subscription)
			.values({ personId: actor.id, ...values })
			.onConflictDoUpdate({ target: subscription.personId, set: values });
	});
}

async function readPreferences(executor: Executor, personId: string): Promise<Preferences> {
	const [row] = await executor
		.select({
			byEmail: subscription.byEmail,
			byPush: subscription.byPush,
			streamCodes: subscription.streamCodes,
			telescopeCode: telescope.code
		})
		.from(subscription)
		.leftJoin(telescope, eq(telescope.id, subscription.telescopeId))
		.where(eq(subscription.personId, personId));
	return row ?? { byEmail: false, byPush: false, streamCodes: [], telescopeCode: null };
}

function readStreams(executor: Executor) {
	return executor
		.select({ code: stream.code, name: stream.name })
		.from(stream)
		.where(isNull(stream.retiredAt))
		.orderBy(stream.name);
}

function readTelescopes(executor: Executor) {
	return executor
		.select({ code: telescope.code, name: telescope.name, site: telescope.site })
		.from(telescope)
		.where(isNull(telescope.retiredAt))
		.orderBy(telescope.name);
}
