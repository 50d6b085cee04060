import { customType, timestamp } from 'drizzle-orm/pg-core';
import type { MocRanges } from '../../sky/regions/jointRegion';

/** An instant, `timestamptz`, as a Date. */
export const instant = (name: string) => timestamp(name, { withTimezone: true, mode: 'date' });

/** A half-open span of time, `tstzrange`. */
export type TimeRange = { start: Date; end: Date };

export const timeRange = customType<{ data: TimeRange; driverData: string }>({
	dataType: () => 'tstzrange',
	toDriver: (range) => `[${range.start.toISOString()},${range.end.toISOString()})`,
	fromDriver: (text) => {
		const [start, end] = text.slice(1, -1).replaceAll('"', '').split(',');
		if (!start || !end) throw new RangeError(`time range ${text} has no bounds`);
		return { start: new Date(start), end: new Date(end) };
	}
});

/** A region of the sky as HEALPix order-29 pixel ranges, `int8multirange` (Singer et al. 2022, AJ 163, 209). */
export const skyRegion = customType<{ data: MocRanges; driverData: string }>({
	dataType: () => 'int8multirange',
	toDriver: (ranges) => `{${ranges.map(([start, end]) => `[${start},${end})`).join(',')}}`,
	fromDriver: (text) =>
		[...text.matchAll(/\[(\d+),(\d+)\)/g)].map((match): [bigint, bigint] => [
			BigInt(match[1]!),
			BigInt(match[2]!)
		])
});

/** Bytes as received. */
export const bytes = customType<{ data: Buffer; driverData: Buffer }>({ dataType: () => 'bytea' });
