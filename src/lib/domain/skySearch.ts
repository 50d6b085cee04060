import { z } from 'zod';
import type { TransientState } from './vocabulary';

function degrees(low: number, high: number) {
	const range = `Must be a number from ${low} to ${high} degrees.`;
	return z
		.union([z.number(), z.string().trim().min(1, 'A number is needed.').transform(Number)], {
			error: 'A number is needed.'
		})
		.pipe(z.number(range).min(low, range).max(high, range));
}

/** What `GET /api/v1/transients` takes in its address: ICRS degrees; `credible` is 50 or 90 %. */
export const skySearchSchema = z.strictObject({
	ra: degrees(0, 360),
	dec: degrees(-90, 90),
	radius: degrees(0, 180),
	credible: z
		.enum(['50', '90'], 'Must be 50 or 90.')
		.default('90')
		.transform((text): 50 | 90 => (text === '50' ? 50 : 90))
});

/** A transient whose joint region touches the patch asked for. */
export type TouchingTransient = {
	designation: string;
	t0: string;
	state: TransientState;
	isTest: boolean;
	isDrill: boolean;
	centre: { raDeg: number; decDeg: number };
	area90Deg2: number;
	/** From the patch's centre to the region's, degrees. */
	separationDeg: number;
};

/** An alert whose own 90 % area overlaps another's. */
export type OverlappingAlert = {
	alertId: string;
	streamCode: string;
	streamName: string;
	packetId: string;
	serial: number;
	t0: string;
	live: boolean;
	designation: string;
};
