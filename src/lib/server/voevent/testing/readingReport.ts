import { readFileSync } from 'node:fs';
import { expect } from 'vitest';
import { DomainError } from '../../domainError';
import type { ParamMap } from '../../../domain/stream';
import { readVoEvent } from '../readVoEvent';

export const fixture = (name: string) => readFileSync(`fixtures/packets/${name}.xml`, 'utf8');

/** The report of the gamma-ray monitor: UTC-ICRS-GEO, RA 83.4°, Dec −8.2°, 3°. */
export const report = fixture('voeventReport');

const paramMap: ParamMap = {
	significance: { group: '', name: 'rate_significance', factor: 1 },
	falseAlarmPerYear: { group: 'Trigger', name: 'false_alarms_per_s', factor: 31_557_600 },
	systematicDeg: { group: 'Position', name: 'systematic', factor: 1 / 60 }
};
export const settings = { paramMap, defaultContainment: 0.9, defaultSystematicDeg: 0.25 };
export const receivedAt = new Date('2026-12-01T03:58:00Z');

export function read(text: string | Buffer, given = settings) {
	return readVoEvent({ body: Buffer.from(text), receivedAt }, given);
}

export function alertOf(text: string, given = settings) {
	const outcome = read(text, given);
	if (outcome.kind !== 'alert') throw new Error(outcome.reason);
	return outcome;
}

export function refusalOf(text: string): DomainError {
	try {
		read(text);
	} catch (error) {
		if (error instanceof DomainError) return error;
		throw error;
	}
	throw new Error('it was read');
}

export function pointersOf(text: string): string[] {
	return refusalOf(text).errors.map(({ pointer }) => pointer);
}

/** The report with one piece of it replaced; fails when the piece is not in it. */
export function changed(from: string, to: string, text = report): string {
	expect(text).toContain(from);
	return text.replace(from, to);
}
