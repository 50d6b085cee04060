import { jointRegion } from '../../src/lib/sky/regions/jointRegion';
import type { CircleShape, Shape } from '../../src/lib/sky/regions/shape';
import { gaussianMap } from './gaussianMap';
import type { BenchRow } from './run';

/** Median times of joint regions, coverage maps and points included. */
export default function skyRegions(): Promise<BenchRow[]> {
	const circles = [circle(83, -8, 3), circle(84, -7, 2), circle(83.5, -7.6, 2 / 60)];
	const map = gaussianMap(10, 500, { raDeg: 83, decDeg: -8 });
	return Promise.resolve([
		['joint_circles_ms', medianMs(circles, 200), 'ms'],
		['joint_map_ms', medianMs([map, circle(85, -6, 3)], 15), 'ms'],
		['joint_map_cpu_ms', medianMs([map, circle(85, -6, 3)], 15, processorMs), 'ms'],
		['map_alone_ms', medianMs([map], 7), 'ms']
	]);
}

function medianMs(parts: Shape[], runs: number, clockMs = () => performance.now()): number {
	for (let i = 0; i < Math.min(5, runs); i++) jointRegion(parts);
	const times: number[] = [];
	for (let i = 0; i < runs; i++) {
		const start = clockMs();
		jointRegion(parts);
		times.push(clockMs() - start);
	}
	return times.sort((a, b) => a - b)[Math.floor(runs / 2)] ?? NaN;
}

/** Processor time of this process, which a busy machine does not lengthen as it does the wall clock. */
function processorMs(): number {
	const { user, system } = process.cpuUsage();
	return (user + system) / 1000;
}

function circle(raDeg: number, decDeg: number, radiusDeg: number): CircleShape {
	return { kind: 'circle', centre: { raDeg, decDeg }, radiusDeg, containment: 0.9 };
}
