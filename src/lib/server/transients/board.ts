import { eq, sql } from 'drizzle-orm';
import type { Board, BoardTelescope, BoardTransient } from '../../domain/board';
import type { TelescopeLimits } from '../../sky/visibility/telescope';
import { requirePermission, type Actor } from '../actor';
import type { App } from '../app';
import type { Database } from '../db/database';
import { closure } from '../db/schema/network';
import { boardRevision, transient } from '../db/schema/transients';
import { telescopeSpecs } from '../outlook/telescopeSpecs';
import { currentWatch } from '../rota/rotaService';
import { holdingSlots } from '../slots/slotList';
import { currentRevision } from '../db/boardRevisions';
import { boardTransients } from './boardRows';

/**
 * What the Now and Duty screens show, the same for everybody who may see it. With `since`, only the
 * transients changed after that revision; `openDesignations` always names all, costliest wait first.
 */
export async function boardFor(app: App, actor: Actor | null, since = 0): Promise<Board> {
	requirePermission(actor, 'viewBoard');
	const board = await wholeBoard(app);
	if (since <= 0 || since > board.revision) return board;
	return { ...board, transients: board.transients.filter((item) => item.revision > since) };
}

type Cached = { revision: number; minute: number; board: Promise<Board> };
/** Per process and database: the newest board; made anew when the revision or the minute changes. */
const cache = new WeakMap<Database, Cached>();

async function wholeBoard(app: App): Promise<Board> {
	const revision = await currentRevision(app);
	const minute = Math.floor(app.now().getTime() / 60_000);
	let entry = cache.get(app.database);
	if (!entry || entry.revision !== revision || entry.minute !== minute) {
		const board = makeBoard(app);
		entry = { revision, minute, board };
		cache.set(app.database, entry);
		board.catch(() => cache.delete(app.database));
	}
	return { ...(await entry.board), serverNow: app.now().toISOString() };
}

async function makeBoard(app: App): Promise<Board> {
	const now = app.now();
	// One snapshot: the revision and what it stands for must not come from two moments.
	return app.database.transaction(
		async (tx) => {
			const [row] = await tx.select({ value: boardRevision.value }).from(boardRevision);
			const open = await tx.select().from(transient).where(eq(transient.state, 'open'));
			const transients = (await boardTransients(tx, open)).sort(byCostOfWaiting);
			const { rows } = await telescopeSpecs(tx, now);
			const closures = await tx
				.select()
				.from(closure)
				.where(sql`${closure.during} @> ${now.toISOString()}::timestamptz`);
			const holds = await holdingSlots(tx, now);
			const telescopes = rows.map((item): BoardTelescope => ({
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
				holds: holds.filter((hold) => hold.telescopeCode === item.code),
				closed: closedOf(closures, item.id)
			}));
			return {
				revision: row!.value,
				serverNow: now.toISOString(),
				openDesignations: transients.map((item) => item.designation),
				transients,
				telescopes,
				watch: await currentWatch(app)
			};
		},
		{ isolationLevel: 'repeatable read', accessMode: 'read only' }
	);
}

/** Costliest wait first; those nobody has decided on come before parked and dropped ones at equal cost. */
export function byCostOfWaiting(a: BoardTransient, b: BoardTransient): number {
	const cost = (item: BoardTransient) => item.outlook?.costOfWaitingPoints ?? -1;
	const dropped = (item: BoardTransient) => Number(item.decision?.decision === 'drop');
	return (
		dropped(a) - dropped(b) ||
		Number(a.isTest) - Number(b.isTest) ||
		cost(b) - cost(a) ||
		b.t0.localeCompare(a.t0)
	);
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
