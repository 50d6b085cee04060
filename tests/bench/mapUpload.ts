import { readFileSync, writeFileSync } from 'node:fs';
import { pathToFileURL } from 'node:url';
import { writeFits } from '../../src/lib/server/fits/writeFits';
import { startStack } from '../e2e/support/stack';
import { gaussianMap } from './gaussianMap';
import type { BenchRow } from './run';

const RUNS = 3;
const MIB = 2 ** 20;
/** A map of order 10 whose cells fill 20 MiB, at 16 bytes a cell. */
const ORDER = 10;
const AREA_DEG2 = 4410;

/**
 * A multi-order map of 20 MiB sent as a file through the built application: time from the first byte sent to the
 * answer, at which the joint region is stored (the slowest of three, the first of them by a cold process), the
 * application's time on a processor for each, and its greatest resident memory over all.
 */
export default async function mapUpload(): Promise<BenchRow[]> {
	const files = Array.from({ length: RUNS }, (_, i) => mapFile(30 + 60 * i));
	const stack = await startStack();
	try {
		const { origin, streamKeys } = stack.addresses;
		forgetPeak(stack.applicationPid);
		const times: number[] = [];
		const before = cpuMs(stack.applicationPid);
		for (const [i, file] of files.entries()) {
			const form = new FormData();
			form.append('packet', JSON.stringify(packetOf(i)));
			form.append('file', new Blob([new Uint8Array(file)]), 'map.fits');
			const startMs = performance.now();
			const answer = await fetch(`${origin}/api/v1/alerts`, {
				method: 'POST',
				headers: { authorization: `Bearer ${streamKeys.tambour}` },
				body: form
			});
			const text = await answer.text();
			times.push(performance.now() - startMs);
			if (answer.status !== 201) throw new Error(`the map was refused: ${text}`);
		}
		return [
			['map_file_mib', (files[0]?.length ?? 0) / MIB, 'MiB'],
			['map_ready_ms', Math.max(...times), 'ms'],
			['map_ready_warm_ms', Math.min(...times), 'ms'],
			['map_cpu_ms', (cpuMs(stack.applicationPid) - before) / RUNS, 'ms'],
			['map_rss_mb', peakMb(stack.applicationPid), 'MB']
		];
	} finally {
		await stack.stop();
	}
}

function mapFile(raDeg: number): Uint8Array {
	const { uniq, density } = gaussianMap(ORDER, AREA_DEG2, { raDeg, decDeg: 20 });
	return writeFits(
		[
			{ name: 'UNIQ', form: 'K', values: uniq },
			{ name: 'PROBDENSITY', form: 'D', unit: 'sr-1', values: density }
		],
		[
			['PIXTYPE', 'HEALPIX'],
			['ORDERING', 'NUNIQ'],
			['COORDSYS', 'C'],
			['MOCORDER', ORDER],
			['INDXSCHM', 'EXPLICIT']
		],
		[]
	);
}

function packetOf(run: number): Record<string, unknown> {
	return {
		packetId: `TB-map-${run}`,
		serial: 1,
		role: 'observation',
		kind: 'report',
		// Days apart, so that each starts a transient of its own.
		t0: new Date(Date.now() - (run + 1) * 86_400_000 * 2).toISOString()
	};
}

/** From now on the kernel counts the peak anew. */
function forgetPeak(pid: number): void {
	writeFileSync(`/proc/${pid}/clear_refs`, '5');
}

/** Time on a processor of all the process's threads so far; the kernel counts in hundredths of a second. */
function cpuMs(pid: number): number {
	const fields = readFileSync(`/proc/${pid}/stat`, 'utf8').split(') ')[1]?.split(' ') ?? [];
	return 10 * (Number(fields[11]) + Number(fields[12]));
}

function peakMb(pid: number): number {
	const status = readFileSync(`/proc/${pid}/status`, 'utf8');
	return Number(/^VmHWM:\s+(\d+) kB/m.exec(status)?.[1] ?? NaN) / 1024;
}

if (process.argv[1] && import.meta.url === pathToFileURL(process.argv[1]).href) {
	for (const [name, value, unit] of await mapUpload()) {
		console.log(`${name} ${Number(value.toPrecision(4))} ${unit}`);
	}
}
