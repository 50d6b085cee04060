import { and, eq } from 'drizzle-orm';
import { z } from 'zod';
import { requirePermission, type Actor } from '../actor';
import { liveParts } from '../alerts/alertStore';
import type { App } from '../app';
import { region } from '../db/schema/transients';
import { DomainError } from '../domainError';
import { fadeOf } from '../outlook/outlookService';
import { standingNotFound } from '../reports/notFoundStore';
import { mocFits } from '../skyFiles/mocFits';
import { writeMocAscii, writeMocJson } from '../skyFiles/mocText';
import { requireTransient } from './transientStore';

/** Query of `GET …/region.moc`. */
export const regionMocSchema = z.strictObject({
	format: z.enum(['fits', 'json', 'ascii']).default('fits'),
	level: z.enum(['50', '90']).default('90')
});

export type RegionMocQuery = z.output<typeof regionMocSchema>;

/** A file to hand out. */
export type RegionFile = { body: Uint8Array | string; type: string; name: string };

/** The joint region's 50 % or 90 % area as a coverage map (IVOA MOC 2.0), one of its three serialisations. */
export async function regionMoc(
	app: App,
	actor: Actor | null,
	designation: string,
	{ format, level }: RegionMocQuery
): Promise<RegionFile> {
	requirePermission(actor, 'viewTransients');
	const row = await requireTransient(app.database, designation);
	const [found] = await app.database
		.select({ moc: level === '50' ? region.moc50 : region.moc90 })
		.from(region)
		.where(and(eq(region.transientId, row.id), eq(region.version, row.regionVersion)));
	if (!found) throw new DomainError('notFound', `${designation} has no region.`);
	const name = `${designation}-${level}.moc`;
	if (format === 'fits') {
		const body = mocFits(found.moc, designation);
		return { body, type: 'application/fits', name: `${name}.fits` };
	}
	if (format === 'json') {
		return { body: writeMocJson(found.moc), type: 'application/json', name: `${name}.json` };
	}
	return {
		body: writeMocAscii(found.moc),
		type: 'text/plain; charset=us-ascii',
		name: `${name}.txt`
	};
}

/** The joint region in force as a multi-order HEALPix map in FITS; made anew in a compute thread. */
export async function regionMap(
	app: App,
	actor: Actor | null,
	designation: string
): Promise<RegionFile> {
	requirePermission(actor, 'viewTransients');
	const row = await requireTransient(app.database, designation);
	const { parts, reports, fade, computedAt } = await app.database.transaction(
		async (tx) => {
			const [stored] = await tx
				.select({ computedAt: region.computedAt })
				.from(region)
				.where(and(eq(region.transientId, row.id), eq(region.version, row.regionVersion)));
			return {
				computedAt: stored?.computedAt,
				parts: await liveParts(tx, row.id),
				reports: await standingNotFound(tx, row.id),
				fade: await fadeOf(tx, row.id)
			};
		},
		{ isolationLevel: 'repeatable read', accessMode: 'read only' }
	);
	if (parts.length === 0 || !computedAt) {
		throw new DomainError('notFound', `${designation} has no region: no alert of it is live.`);
	}
	const t0Ms = Math.min(...parts.map((part) => part.t0.getTime()));
	const later = reports.filter((report) => report.atMs >= t0Ms);
	const body = await app.compute.regionFile({
		shapes: parts.map((part) => part.shape),
		search: later.length > 0 && fade ? { reports: later, t0Ms, fade } : null,
		designation,
		version: row.regionVersion,
		t0: row.t0.toISOString(),
		computedAt: computedAt.toISOString()
	});
	return { body, type: 'application/fits', name: `${designation}.fits` };
}
