import { existsSync } from 'node:fs';
import { resolve } from 'node:path';
import { pathToFileURL } from 'node:url';
import { Piscina } from 'piscina';
import type { NotFound } from '../../sky/catch/looks';
import type { SearchedRegion } from '../../sky/catch/searchedRegion';
import type { FadeModel, OutlookInput, Outlook } from '../../sky/outlook/outlook';
import type { JointRegion } from '../../sky/regions/jointRegion';
import type { MapField } from '../../sky/regions/mapFault';
import type { MapSource } from '../../sky/regions/mapShapeFrom';
import type { MapShape, Shape } from '../../sky/regions/shape';

/** The arguments of `searchedRegion`, in one piece for a thread. */
export type SearchInput = {
	shapes: Shape[];
	reports: NotFound[];
	t0Ms: number;
	fade: FadeModel;
};

/** A map in its normal form, or what is wrong with it. */
export type MapAnswer =
	{ shape: MapShape } | { fault: { field: MapField; entry: number | null; detail: string } };

/** The heavy computations, off the web process's event loop. */
export type ComputePool = {
	outlook: (input: OutlookInput) => Promise<Outlook>;
	jointRegion: (parts: Shape[]) => Promise<JointRegion>;
	searchedRegion: (input: SearchInput) => Promise<SearchedRegion>;
	mapShape: (source: MapSource) => Promise<MapAnswer>;
	close: () => Promise<void>;
};

/** Worker threads that run `build-workers/compute.js`; idle ones stay, so that they keep warm. */
export function createComputePool(threads: number): ComputePool {
	const filename = resolve('build-workers/compute.js');
	if (!existsSync(filename)) {
		throw new Error('build-workers/compute.js is missing: run npm run build:workers first');
	}
	const pool = new Piscina({
		filename: pathToFileURL(filename).href,
		minThreads: 1,
		maxThreads: threads,
		idleTimeout: Infinity
	});
	return {
		outlook: (input) => pool.run(input, { name: 'outlook' }) as Promise<Outlook>,
		jointRegion: (parts) => pool.run(parts, { name: 'joint' }) as Promise<JointRegion>,
		searchedRegion: (input) => pool.run(input, { name: 'searched' }) as Promise<SearchedRegion>,
		mapShape: (source) => pool.run(source, { name: 'mapShape' }) as Promise<MapAnswer>,
		close: () => pool.destroy()
	};
}
