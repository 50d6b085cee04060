import type { Equatorial } from '../../sky/angle';
import { geocentreTaiMs } from '../../sky/time/barycentre';
import { followsLeapSecond, utcMsOfTai } from '../../sky/time/leapSeconds';
import { taiMsOf } from '../../sky/time/timeScale';
import { shown, type CoordinateSystem } from './coordinateSystem';
import { onlyChildOf, elementAt, floatOf, refusal, type XmlElement } from './xmlElement';

const FIRST_YEAR = 1990;
const LAST_YEAR = 2099;
const ISO_TIME =
	/^(\d{4})-(\d{2})-(\d{2})[T ](\d{2}):(\d{2})(?::(\d{2})(?:[.,](\d{1,12}))?)?\s?(Z|[+-]\d{2}:?\d{2})?$/;

export type EventTime = { t0: string; notes: string[] };

/**
 * The event's time in UTC; null when none is given. A time without a zone is in the system's scale, a
 * barycentric one is brought to the Earth's centre for light from `position`.
 *
 * @throws DomainError `invalid` naming what is wrong with it.
 */
export function eventTime(
	coords: XmlElement | undefined,
	system: CoordinateSystem,
	position: Equatorial | null
): EventTime | null {
	const instant = elementAt(coords, 'Time', 'TimeInstant');
	if (!instant) return null;
	requirePlainTime(instant, system);
	const iso = onlyChildOf(instant, 'ISOTime');
	if (!iso || iso.text === '') return null;
	const notes: string[] = [];
	const reading = readingOf(iso, notes);
	if (reading.zoned && system.scale !== 'UTC') {
		throw refusal(
			iso.pointer,
			`gives a zone, which a time in the scale ${system.scale} can’t have`
		);
	}
	if (reading.inLeapSecond && system.scale !== 'UTC') {
		throw refusal(iso.pointer, `has a second 60, which the scale ${system.scale} does not`);
	}
	let taiMs = taiMsOf(system.scale, reading.ms);
	if (system.scale !== 'UTC') notes.push(`T0 turned from ${system.scale} into UTC`);
	if (system.centre === 'BARY') {
		if (!position) {
			throw refusal(
				iso.pointer,
				`is at the barycentre (${system.id}) and there is no position to bring it to the Earth for`
			);
		}
		const earthTaiMs = geocentreTaiMs(position, taiMs);
		const delayS = (taiMs - earthTaiMs) / 1000;
		notes.push(
			`T0 brought from the barycentre to the Earth’s centre by ${delayS.toFixed(2)} s of light travel (good to 0.01 s)`
		);
		taiMs = earthTaiMs;
	}
	return { t0: isoOf(utcMsOfTai(taiMs), iso.pointer), notes };
}

/** An instant that does not depend on a coordinate system, as `Who/Date` has it; null when it can't be read. */
export function plainUtcDate(date: XmlElement | undefined): string | null {
	if (!date) return null;
	try {
		return isoOf(readingOf(date, []).ms, date.pointer);
	} catch {
		return null;
	}
}

function requirePlainTime(instant: XmlElement, system: CoordinateSystem): void {
	const offset = onlyChildOf(instant, 'TimeOffset');
	if (offset && (floatOf(offset.text) ?? 0) !== 0) {
		throw refusal(offset.pointer, 'is not read; give the whole time as ISOTime');
	}
	const scale = onlyChildOf(instant, 'TimeScale');
	if (scale && scale.text !== '' && scale.text !== system.scale) {
		throw refusal(scale.pointer, `is ${shown(scale.text)}, but the system is ${system.id}`);
	}
}

type Reading = { ms: number; zoned: boolean; inLeapSecond: boolean };

function readingOf({ text, pointer }: XmlElement, notes: string[]): Reading {
	const parts = text.length <= 60 ? ISO_TIME.exec(text) : null;
	if (!parts) throw refusal(pointer, 'is not a time as 2026-12-01T03:41:27.5');
	const [year, month, day, hour, minute, second] = [1, 2, 3, 4, 5, 6].map((index) =>
		Number(parts[index] ?? 0)
	) as [number, number, number, number, number, number];
	if (year < FIRST_YEAR || year > LAST_YEAR) {
		throw refusal(pointer, `is in the year ${year}; it must lie between 1990 and 2100`);
	}
	const date = new Date(Date.UTC(year, month - 1, day));
	const isDate = date.getUTCMonth() === month - 1 && date.getUTCDate() === day;
	if (!isDate || hour > 23 || minute > 59 || second > 60) {
		throw refusal(pointer, `is ${shown(text)}, which is no date and time`);
	}
	const midnightMs = date.getTime();
	const inLeapSecond = second === 60;
	if (inLeapSecond) {
		const atEnd = hour === 23 && minute === 59 && followsLeapSecond(midnightMs + 86_400_000);
		if (!atEnd) throw refusal(pointer, `is ${shown(text)}, where there was no leap second`);
		notes.push('T0 is inside a leap second; the second after it was taken');
	}
	const fractionMs = Number(`0.${parts[7] ?? 0}`) * 1000;
	const ms =
		midnightMs +
		((hour * 60 + minute) * 60 + second) * 1000 +
		fractionMs -
		zoneMs(parts[8], pointer);
	return { ms, zoned: parts[8] !== undefined, inLeapSecond };
}

function zoneMs(zone: string | undefined, pointer: string): number {
	if (zone === undefined || zone === 'Z') return 0;
	const hours = Number(zone.slice(1, 3));
	const minutes = Number(zone.slice(-2));
	if (hours > 14 || minutes > 59) throw refusal(pointer, `has the zone ${zone}, which is none`);
	return (zone[0] === '-' ? -1 : 1) * (hours * 60 + minutes) * 60_000;
}

function isoOf(utcMs: number, pointer: string): string {
	const date = new Date(Math.round(utcMs));
	const year = date.getUTCFullYear();
	if (year < FIRST_YEAR || year > LAST_YEAR) {
		throw refusal(pointer, 'must lie between the years 1990 and 2100 in UTC');
	}
	return date.toISOString();
}
