import { and, asc, eq, isNotNull, isNull } from 'drizzle-orm';
import type { NotFound } from '../../sky/catch/looks';
import type { Transaction } from '../db/database';
import { telescope } from '../db/schema/network';
import { report, slot } from '../db/schema/slots';

/**
 * The reports of nothing on a transient that stand, with where their telescopes looked: every tile of the
 * slot, as a report does not say which were left out. Reports without a slot (partners') name no footprint
 * and say nothing here. A limit counts as it is in whichever filter: the fade model has one band (R).
 */
export async function standingNotFound(tx: Transaction, transientId: string): Promise<NotFound[]> {
	const rows = await tx
		.select({
			tiles: slot.tiles,
			detectors: telescope.detectors,
			limitMag: report.limitMag,
			observedAt: report.observedAt
		})
		.from(report)
		.innerJoin(slot, eq(slot.id, report.slotId))
		.innerJoin(telescope, eq(telescope.id, slot.telescopeId))
		.where(
			and(
				eq(report.transientId, transientId),
				eq(report.kind, 'limit'),
				isNotNull(report.limitMag),
				isNull(report.withdrawnAt)
			)
		)
		.orderBy(asc(report.observedAt), asc(report.id));
	return rows.flatMap(({ tiles, detectors, limitMag, observedAt }) =>
		limitMag === null || tiles.length === 0
			? []
			: [
					{
						tiles: tiles.map(({ centre, rotationDeg }) => ({ centre, rotationDeg })),
						detectors,
						limitMag,
						atMs: observedAt.getTime()
					}
				]
	);
}
