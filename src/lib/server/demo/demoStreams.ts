import { and, eq, ne } from 'drizzle-orm';
import type { StreamClass } from '../../domain/vocabulary';
import type { FadeModel } from '../../sky/outlook/outlook';
import type { Transaction } from '../db/database';
import { stream, streamBroker, streamKey, type ParamMap } from '../db/schema/alerts';
import { makeStreamKey } from '../streams/streamKeyService';

export const DEMO_STREAM_CODES = ['tambour', 'carapace', 'needle'] as const;
export type DemoStreamCode = (typeof DEMO_STREAM_CODES)[number];

/** Mean and spread from Akerlof & Swan 2007 (arXiv:0709.0962); kept wide because a later sample is fainter. */
export const DEMO_FADE: FadeModel = { m1Mean: 22.2, m1Spread: 2.3, alpha: 1 };

type DemoStream = {
	code: DemoStreamCode;
	name: string;
	streamClass: StreamClass;
	defaultContainment: number;
	defaultSystematicDeg: number;
	alertsPerYear: number;
	coincidenceWindowS: number;
	silentAfterMinutes: number;
};

/** Invented for the demo: a gamma-ray monitor, a wide-field and a narrow-field X-ray instrument. */
export const DEMO_STREAMS: readonly DemoStream[] = [
	{
		code: 'tambour',
		name: 'Tambour',
		streamClass: 'gamma',
		defaultContainment: 0.9,
		defaultSystematicDeg: 0.5,
		alertsPerYear: 200,
		coincidenceWindowS: 3600,
		silentAfterMinutes: 4320
	},
	{
		code: 'carapace',
		name: 'Carapace',
		streamClass: 'wideXray',
		defaultContainment: 0.9,
		defaultSystematicDeg: 0.01,
		alertsPerYear: 160,
		coincidenceWindowS: 3600,
		silentAfterMinutes: 5760
	},
	{
		code: 'needle',
		name: 'Needle',
		streamClass: 'narrowXray',
		defaultContainment: 0.9,
		defaultSystematicDeg: 0.0003,
		alertsPerYear: 60,
		coincidenceWindowS: 7200,
		silentAfterMinutes: 20_160
	}
];

/** Inserts the streams; answers their ids by code. */
export async function seedStreams(
	tx: Transaction,
	createdAt: Date
): Promise<Map<DemoStreamCode, string>> {
	const rows = await tx
		.insert(stream)
		.values(DEMO_STREAMS.map((one) => ({ ...one, fade: DEMO_FADE, createdAt })))
		.returning({ id: stream.id, code: stream.code });
	return new Map(rows.map(({ id, code }) => [code as DemoStreamCode, id]));
}

/** The stream whose packets come as VOEvents, and where they hold what VOEvent has no element for. */
const VOEVENT_STREAM: DemoStreamCode = 'carapace';
const VOEVENT_PARAMS: ParamMap = {
	significance: { group: 'detection', name: 'significance', factor: 1 },
	falseAlarmPerYear: { group: 'detection', name: 'false_alarm_rate', factor: 1 }
};

/** Subscribes the VOEvent stream to the demo's broker, in place of the port it had before. */
export async function seedBroker(
	tx: Transaction,
	{ host, port }: { host: string; port: number }
): Promise<void> {
	const [owner] = await tx
		.update(stream)
		.set({ paramMap: VOEVENT_PARAMS })
		.where(eq(stream.code, VOEVENT_STREAM))
		.returning({ id: stream.id });
	if (!owner) return;
	await tx
		.delete(streamBroker)
		.where(
			and(
				eq(streamBroker.streamId, owner.id),
				eq(streamBroker.host, host),
				ne(streamBroker.port, port)
			)
		);
	await tx
		.insert(streamBroker)
		.values({ streamId: owner.id, host, port, ivornPrefix: `ivo://${VOEVENT_STREAM}.example/` })
		.onConflictDoNothing();
}

/** Makes one key for each demo stream and answers them in clear, for the feed's key file. */
export async function seedStreamKeys(
	tx: Transaction,
	streamIds: Map<string, string>,
	at: Date
): Promise<Record<string, string>> {
	const keys: Record<string, string> = {};
	for (const code of DEMO_STREAM_CODES) {
		const streamId = streamIds.get(code);
		if (!streamId) continue;
		const { key, prefix, hash } = makeStreamKey(code);
		await tx
			.insert(streamKey)
			.values({ streamId, label: DEMO_KEY_LABEL, prefix, hash, createdAt: at });
		keys[code] = key;
	}
	return keys;
}

export const DEMO_KEY_LABEL = 'Demo feed';
