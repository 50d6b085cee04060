import { getTableColumns } from 'drizzle-orm';
import { coneMoc } from '../../sky/moc/coneMoc';
import type { MocRanges } from '../../sky/moc/moc';
import { radiusFromKappa } from '../../sky/regions/containment';
import { fisherOf } from '../../sky/regions/fisher';
import type { Shape } from '../../sky/regions/shape';
import { alert } from '../db/schema/alerts';

/**
 * Cells that cover an alert's own 90 % area, systematic error included; of a circle with hard edges all of it.
 * Null for the other shapes, whose cells would take a mesh to find, and for retractions.
 */
export function alertSky(shape: Shape | null): MocRanges | null {
	if (shape?.kind === 'hardCircle') return coneMoc(shape.centre, shape.radiusDeg);
	if (shape?.kind !== 'circle') return null;
	return coneMoc(shape.centre, radiusFromKappa(fisherOf(shape).kappa, 0.9));
}

/** An alert's columns without its cells: a few hundred ranges that only searches need. */
const { moc90: _, ...withoutSky } = getTableColumns(alert);
export const alertColumns = withoutSky;

export type AlertWithoutSky = Omit<typeof alert.$inferSelect, 'moc90'>;
