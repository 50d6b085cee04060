// Entry of the compute threads (built by vite.workers.config.ts, run by outlook/computePool.ts).
import { constants, setPriority } from 'node:os';
import { isMainThread } from 'node:worker_threads';
import { FileFault } from './lib/server/fits/fileFault';
import { readSkyFile } from './lib/server/skyFiles/readSkyFile';
import { searchedRegion, type SearchedRegion } from './lib/sky/catch/searchedRegion';
import type { NotFound } from './lib/sky/catch/looks';
import { computeOutlook } from './lib/sky/outlook/computeOutlook';
import type { FadeModel, Outlook, OutlookInput } from './lib/sky/outlook/outlook';
import { logBayesFactor, logBayesOfJoining } from './lib/sky/regions/agreement';
import { jointRegion } from './lib/sky/regions/jointRegion';
import type { JointRegion } from './lib/sky/regions/jointRegion';
import { MapFault, type MapField } from './lib/sky/regions/mapFault';
import { mapShapeFrom, type MapSource } from './lib/sky/regions/mapShapeFrom';
import type { MapShape, Shape } from './lib/sky/regions/shape';

// On Linux a priority belongs to a thread: where cores are few, answers to people go first.
if (!isMainThread) setPriority(constants.priority.PRIORITY_BELOW_NORMAL);

export { mocOutline as outline } from './lib/sky/moc/mocOutline';
export { regionFile } from './lib/server/skyFiles/regionFile';
export { outlookText } from './lib/server/outlook/outlookText';

export function outlook(input: OutlookInput): Outlook {
	return computeOutlook(input);
}

export { logBayesFactor as bayes };

export function bayesOfJoining({ parts, shape }: { parts: Shape[]; shape: Shape }): number {
	return logBayesOfJoining(parts, shape);
}

export function joint(parts: Shape[]): JointRegion {
	return jointRegion(parts);
}

/** What is wrong is part of the answer, as an error loses its fields on the way out of a thread. */
export function mapShape(
	source: MapSource
): { shape: MapShape } | { fault: { field: MapField; entry: number | null; detail: string } } {
	try {
		return { shape: mapShapeFrom(source) };
	} catch (error) {
		if (!(error instanceof MapFault)) throw error;
		const { field, entry, detail } = error;
		return { fault: { field, entry, detail } };
	}
}

/** The same for a file's bytes. */
export function fileShape(
	bytes: ArrayBuffer
): { shape: MapShape } | { fault: { place: string; detail: string } } {
	try {
		return { shape: readSkyFile(new Uint8Array(bytes)) };
	} catch (error) {
		if (!(error instanceof FileFault)) throw error;
		return { fault: { place: error.place, detail: error.detail } };
	}
}

export function searched(input: {
	shapes: Shape[];
	reports: NotFound[];
	t0Ms: number;
	fade: FadeModel;
}): SearchedRegion {
	return searchedRegion(input.shapes, input.reports, input.t0Ms, input.fade);
}
