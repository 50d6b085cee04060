import { existsSync } from 'node:fs';
import { resolve } from 'node:path';
import { pathToFileURL } from 'node:url';
import { Piscina } from 'piscina';
import type { Rings } from '../../domain/regionOutline';
import type { NotFound } from '../../sky/catch/looks';
import type { SearchedRegion } from '../../sky/catch/searchedRegion';
import type { FadeModel, OutlookInput, Outlook } from '../../sky/outlook/outlook';
import type { JointRegion } from '../../sky/regions/jointRegion';
import type { MocRanges } from '../../sky/moc/moc';
import type { MapField } from '../../sky/regions/mapFault';
import type { MapSource } from '../../sky/regions/mapShapeFrom';
import type { MapShape, Shape } from '../../sky/regions/shape';
import type { RegionFileInput } from '../skyFiles/regionFile';
import type { OutlookText } from './outlookText';

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

/** A file's region in its normal form, or where in the file what is wrong. */
export type FileAnswer = { shape: MapShape } | { fault: { place: string; detail: string } };

/** The heavy computations, off the web process's event loop. */
export type ComputePool = {
	outlook: (input: OutlookInput) => Promise<Outlook>;
	/** The same written as JSON in the thread. */
	outlookText: (input: OutlookInput) => Promise<OutlookText>;
	jointRegion: (parts: Shape[]) => Promise<JointRegion>;
	searchedRegion: (input: SearchInput) => Promise<SearchedRegion>;
	/** ln of Bayes factors: of all parts, and of one more shape having their source. */
	logBayesFactor: (parts: Shape[]) => Promise<number>;
	logBayesOfJoining: (input: { parts: Shape[]; shape: Shape }) => Promise<number>;
	mapShape: (source: MapSource) => Promise<MapAnswer>;
	/** The region in a file's bytes; `load` is called when it is this file's turn, so that few are held at once. */
	fileShape: (load: () => Promise<ArrayBuffer>) => Promise<FileAnswer>;
	/** The joint region as a multi-order map in FITS. */
	regionFile: (input: RegionFileInput) => Promise<Uint8Array>;
	/** Closed rings around a coverage map. */
	outline: (moc: MocRanges) => Promise<Rings>;
	close: () => Promise<void>;
};

/** A thread that has read a map gives its memory back after this long. */
const READER_IDLE_MS = 30_000;

/** Worker threads that run `build-workers/compute.js`; idle ones stay, so that they keep warm. */
export function createComputePool(threads: number): ComputePool {
	const filename = resolve('build-workers/compute.js');
	if (!existsSync(filename)) {
		throw new Error('build-workers/compute.js is missing: run npm run build:workers first');
	}
	const options = { filename: pathToFileURL(filename).href, minThreads: 1 };
	const pool = new Piscina({ ...options, maxThreads: threads, idleTimeout: Infinity });
	// Reading a map takes seconds: nobody's outlook waits behind it.
	const reader = new Piscina({
		...options,
		minThreads: 0,
		maxThreads: 1,
		idleTimeout: READER_IDLE_MS
	});
	let turn: Promise<unknown> = Promise.resolve();
	const fileShape = async (load: () => Promise<ArrayBuffer>) => {
		const bytes = await load();
		return reader.run(bytes, { name: 'fileShape', transferList: [bytes] }) as Promise<FileAnswer>;
	};
	return {
		outlook: (input) => pool.run(input, { name: 'outlook' }) as Promise<Outlook>,
		outlookText: (input) => pool.run(input, { name: 'outlookText' }) as Promise<OutlookText>,
		jointRegion: (parts) => pool.run(parts, { name: 'joint' }) as Promise<JointRegion>,
		searchedRegion: (input) => pool.run(input, { name: 'searched' }) as Promise<SearchedRegion>,
		logBayesFactor: (parts) => pool.run(parts, { name: 'bayes' }) as Promise<number>,
		logBayesOfJoining: (input) => pool.run(input, { name: 'bayesOfJoining' }) as Promise<number>,
		mapShape: (source) => reader.run(source, { name: 'mapShape' }) as Promise<MapAnswer>,
		fileShape: (load) => {
			const answer = turn.then(() => fileShape(load));
			turn = answer.catch(() => undefined);
			return answer;
		},
		regionFile: (input) => pool.run(input, { name: 'regionFile' }) as Promise<Uint8Array>,
		outline: (moc) => pool.run(moc, { name: 'outline' }) as Promise<Rings>,
		close: async () => {
			await Promise.all([pool.destroy(), reader.destroy()]);
		}
	};
}
