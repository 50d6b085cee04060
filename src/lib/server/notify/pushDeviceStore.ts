import { and, count, eq } from 'drizzle-orm';
import type { PushDevice, PushDeviceInput } from '../../domain/preferences';
import type { Executor } from '../db/database';
import { pushDevice } from '../db/schema/circulars';

export async function readPushDevices(executor: Executor, personId: string): Promise<PushDevice[]> {
	const rows = await executor
		.select()
		.from(pushDevice)
		.where(eq(pushDevice.personId, personId))
		.orderBy(pushDevice.createdAt);
	return rows.map(({ id, name, endpoint, createdAt, lastSentAt }) => ({
		id,
		name,
		endpoint,
		createdAt: createdAt.toISOString(),
		lastSentAt: lastSentAt?.toISOString() ?? null
	}));
}

export async function findPushDevice(executor: Executor, endpoint: string) {
	const [row] = await executor.select().from(pushDevice).where(eq(pushDevice.endpoint, endpoint));
	return row ?? null;
}

export async function countPushDevices(executor: Executor, personId: string): Promise<number> {
	const [row] = await executor
		.select({ count: count() })
		.from(pushDevice)
		.where(eq(pushDevice.personId, personId));
	return row!.count;
}

/** Keeps the device; one that is known by its endpoint gets the new name and owner. */
export async function keepPushDevice(
	executor: Executor,
	personId: string,
	{ name, endpoint, keys }: PushDeviceInput,
	at: Date
): Promise<string> {
	const [row] = await executor
		.insert(pushDevice)
		.values({ personId, name, endpoint, ...keys, createdAt: at })
		.onConflictDoUpdate({ target: pushDevice.endpoint, set: { personId, name, ...keys } })
		.returning({ id: pushDevice.id });
	return row!.id;
}

const own = (personId: string, deviceId: string) =>
	and(eq(pushDevice.id, deviceId), eq(pushDevice.personId, personId));

export async function readOwnPushDevice(executor: Executor, personId: string, deviceId: string) {
	const [row] = await executor.select().from(pushDevice).where(own(personId, deviceId));
	return row ?? null;
}

export async function removeOwnPushDevice(
	executor: Executor,
	personId: string,
	deviceId: string
): Promise<boolean> {
	const rows = await executor
		.delete(pushDevice)
		.where(own(personId, deviceId))
		.returning({ id: pushDevice.id });
	return rows.length > 0;
}
