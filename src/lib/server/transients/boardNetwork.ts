import { sql } from 'drizzle-orm';
import type { BoardTelescope, BoardWatch } from '../../domain/board';
import type { TelescopeLimits } from '../../sky/visibility/telescope';
import type { App } from '../app';
import type { Transaction } from '../db/database';
import { closure } from '../db/schema/network';
import { telescopeSpecs } from '../outlook/telescopeSpecs';
import { currentWatch } from '../rota/rotaService';
import { boardNames, type BoardNames } from './boardNames';

/** What all transients share; it stands for one revision of the network, for a minute. */
export type BoardNetwork = {
	network: number;
	minute: number;
	names: BoardNames;
	telescopes: Omit<BoardTelescope, 'holds'>[];
	watch: BoardWatch | null;
};

export async function boardNetwork(
	app: App,
	tx: Transaction,
	at: Pick<BoardNetwork, 'network' | 'minute'>
): Promise<BoardNetwork> {
	const now = app.now();
	return {
		...at,
		names: await boardNames(tx),
		telescopes: await boardTelescopes(tx, now),
		watch: await currentWatch(app)
	};
}

async function boardTelescopes(tx: Transaction, now: Date): Promise<BoardNetwork['telescopes']> {
	const { rows } = await telescopeSpecs(tx, now);
	const closures = await tx
		.select()
		.from(closure)
		.where(sql`${closure.during} @> ${now.toISOString()}::timestamptz`);
	return rows.map((item) => ({
		code: item.code,
		name: item.name,
		site: item.site,
		apertureM: item.apertureM,
		latDeg: item.latDeg,
		lonDeg: item.lonDeg,
		minAltDeg: item.limits.minAltDeg,
		sunDistanceDeg: item.limits.sunDistanceDeg,
		filters: item.depths.map((depth) => depth.filter),
		exposureS: item.exposureS,
		limits: boardLimits(item.limits),
		// telescopeSpecs refuses a telescope without a filter.
		depth: item.depths[0]!,
		overheadS: item.overheadS,
		detectors: item.detectors,
		closed: closedOf(closures, item.id)
	}));
}

function boardLimits({
	sunAltMaxDeg,
	maxAltDeg,
	hourAngleMaxH,
	decMinDeg,
	decMaxDeg,
	moonDistanceDeg,
	horizon
}: TelescopeLimits): BoardTelescope['limits'] {
	return {
		sunAltMaxDeg,
		maxAltDeg,
		hourAngleMaxH,
		decMinDeg,
		decMaxDeg,
		moonDistanceDeg,
		hasHorizon: horizon !== null
	};
}

function closedOf(
	closures: (typeof closure.$inferSelect)[],
	telescopeId: string
): BoardTelescope['closed'] {
	const own = closures.filter((item) => item.telescopeId === telescopeId);
	const last = own.sort((a, b) => b.during.end.getTime() - a.during.end.getTime())[0];
	return last ? { until: last.during.end.toISOString(), reason: last.reason } : null;
}
