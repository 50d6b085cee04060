import { and, eq } from 'drizzle-orm';
import type { RegionOutline, Rings } from '../../domain/regionOutline';
import type { MocRanges } from '../../sky/moc/moc';
import { separationDeg } from '../../sky/vector';
import { requirePermission, type Actor } from '../actor';
import type { App } from '../app';
import type { Database } from '../db/database';
import { region } from '../db/schema/transients';
import { DomainError } from '../domainError';
import { requireTransient } from './transientStore';

/**
 * The version of a transient's joint region that is meant: the one asked for, or else the one in force.
 *
 * @throws DomainError `notFound` when there is no such transient, or no region yet.
 */
export async function regionVersion(
	app: App,
	actor: Actor | null,
	designation: string,
	asked: number | null
): Promise<{ transientId: string; version: number }> {
	requirePermission(actor, 'viewBoard');
	const row = await requireTransient(app.database, designation);
	const version = asked ?? row.regionVersion;
	if (version < 1 || version > row.regionVersion) {
		throw new DomainError('notFound', `${designation} has no such version of its region.`);
	}
	return { transientId: row.id, version };
}

/** Per process and database: the outlines asked for last. A version never changes. */
const known = new WeakMap<Database, Map<string, Promise<RegionOutline>>>();
const MOST_KNOWN = 50;

/** One version of a joint region, to draw; made once, in a compute thread. */
export function regionOutline(
	app: App,
	actor: Actor | null,
	{ transientId, version }: { transientId: string; version: number }
): Promise<RegionOutline> {
	requirePermission(actor, 'viewBoard');
	const outlines = known.get(app.database) ?? new Map<string, Promise<RegionOutline>>();
	known.set(app.database, outlines);
	const key = `${transientId} ${version}`;
	let made = outlines.get(key);
	if (!made) {
		made = makeOutline(app, transientId, version);
		outlines.set(key, made);
		made.catch(() => outlines.delete(key));
		if (outlines.size > MOST_KNOWN) outlines.delete(outlines.keys().next().value!);
	}
	return made;
}

async function makeOutline(app: App, transientId: string, version: number): Promise<RegionOutline> {
	const [row] = await app.database
		.select({ moc50: region.moc50, moc90: region.moc90 })
		.from(region)
		.where(and(eq(region.transientId, transientId), eq(region.version, version)));
	if (!row) throw new DomainError('notFound', 'There is no such version of the region.');
	const outlineOf = async (moc: MocRanges) => rounded(await app.compute.outline(moc));
	return {
		version,
		outline50: await outlineOf(row.moc50),
		outline90: await outlineOf(row.moc90)
	};
}

/** To a hundredth of an edge: most of the digits would be noise, and they make most of the answer. */
function rounded(rings: Rings): Rings {
	return rings.map((ring) => {
		const [first, second] = ring;
		if (!first || !second) return ring;
		const digits = Math.max(2, Math.ceil(2 - Math.log10(separationDeg(first, second))));
		const round = (angleDeg: number) => Number(angleDeg.toFixed(Math.min(digits, 12)));
		return ring.map(({ raDeg, decDeg }) => ({ raDeg: round(raDeg), decDeg: round(decDeg) }));
	});
}
