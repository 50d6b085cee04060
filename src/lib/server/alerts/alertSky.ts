import { and, desc, eq, getTableColumns, isNotNull, isNull } from 'drizzle-orm';
import { coneMoc } from '../../sky/moc/coneMoc';
import type { MocRanges } from '../../sky/moc/moc';
import { radiusFromKappa } from '../../sky/regions/containment';
import { fisherOf } from '../../sky/regions/fisher';
import type { Shape } from '../../sky/regions/shape';
import type { App } from '../app';
import { alert } from '../db/schema/alerts';
import { logger } from '../logger';

/**
 * Cells that cover an alert's own 90 % area, systematic error included; of a circle with hard edges all of it.
 * Null for the other shapes, whose cells take a mesh to find, and for retractions.
 */
export function circleSky(shape: Shape | null): MocRanges | null {
	if (shape?.kind === 'hardCircle') return coneMoc(shape.centre, shape.radiusDeg);
	if (shape?.kind !== 'circle') return null;
	return coneMoc(shape.centre, radiusFromKappa(fisherOf(shape).kappa, 0.9));
}

/** The same of any shape, other than circles by the mesh's 90 % region, in a compute thread. */
export async function alertSky(app: App, shape: Shape): Promise<MocRanges> {
	return circleSky(shape) ?? (await app.compute.jointRegion([shape])).moc90;
}

/**
 * Works out the cells of the alerts that have none yet, and keeps them. An alert whose shape can't be worked
 * out stays without and is tried again the next time.
 */
export async function fillAlertSky(app: App): Promise<void> {
	const open = await app.database
		.select({ id: alert.id })
		.from(alert)
		.where(and(isNull(alert.moc90), isNotNull(alert.shape)))
		.orderBy(desc(alert.receivedAt));
	for (const { id } of open) {
		// One at a time: a map is large, and the threads have outlooks to make.
		const [row] = await app.database
			.select({ shape: alert.shape })
			.from(alert)
			.where(eq(alert.id, id));
		if (!row?.shape) continue;
		try {
			const moc90 = await alertSky(app, row.shape);
			await app.database.update(alert).set({ moc90 }).where(eq(alert.id, id));
		} catch (error) {
			logger.warn({ alert: id, error: (error as Error).message }, 'no cells for an alert');
		}
	}
}

/** An alert's columns without its cells: a few hundred ranges that only searches need. */
const { moc90: _, ...withoutSky } = getTableColumns(alert);
export const alertColumns = withoutSky;

export type AlertWithoutSky = Omit<typeof alert.$inferSelect, 'moc90'>;
