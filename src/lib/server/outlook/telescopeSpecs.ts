import { and, eq, gt, isNull, sql } from 'drizzle-orm';
import type { TelescopeSpec } from '../../sky/visibility/telescope';
import type { Executor } from '../db/database';
import { closure, telescope } from '../db/schema/network';

export type TelescopeRow = typeof telescope.$inferSelect;

/** Telescopes in service, with the closures that end after `from`, as the sky engine wants them. */
export async function telescopeSpecs(
	executor: Executor,
	from: Date,
	onlyId?: string
): Promise<{ rows: TelescopeRow[]; specs: TelescopeSpec[] }> {
	const inService = isNull(telescope.retiredAt);
	const rows = await executor
		.select()
		.from(telescope)
		.where(onlyId ? and(inService, eq(telescope.id, onlyId)) : inService)
		.orderBy(telescope.code);
	const closures = await executor
		.select()
		.from(closure)
		.where(gt(sql`upper(${closure.during})`, from.toISOString()));
	const specs = rows.map((row): TelescopeSpec => {
		const depth = row.depths[0];
		if (!depth) throw new RangeError(`telescope ${row.code} has no filter`);
		return {
			id: row.id,
			site: { latDeg: row.latDeg, lonDeg: row.lonDeg, heightM: row.heightM },
			limits: row.limits,
			detectors: row.detectors,
			depth,
			exposureS: row.exposureS,
			overheadS: row.overheadS,
			maxTiles: row.maxTiles,
			closures: closures
				.filter((item) => item.telescopeId === row.id)
				.map((item) => ({
					startMs: item.during.start.getTime(),
					endMs: item.during.end.getTime(),
					reason: item.reason
				}))
		};
	});
	return { rows, specs };
}
