import { and, eq } from 'drizzle-orm';
import type { RegionOutline, Rings } from '../../domain/regionOutline';
import { mocOutline } from '../../sky/moc/mocOutline';
import { separationDeg } from '../../sky/vector';
import { requirePermission, type Actor } from '../actor';
import type { App } from '../app';
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

/** One version of a joint region, to draw; it never changes. */
export async function regionOutline(
	app: App,
	actor: Actor | null,
	{ transientId, version }: { transientId: string; version: number }
): Promise<RegionOutline> {
	requirePermission(actor, 'viewBoard');
	const [row] = await app.database
		.select({ moc50: region.moc50, moc90: region.moc90 })
		.from(region)
		.where(and(eq(region.transientId, transientId), eq(region.version, version)));
	if (!row) throw new DomainError('notFound', 'There is no such version of the region.');
	return {
		version,
		outline50: rounded(mocOutline(row.moc50)),
		outline90: rounded(mocOutline(row.moc90))
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
