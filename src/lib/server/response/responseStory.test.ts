import { describe, expect, it } from 'vitest';
import { formatStepTime } from '../../domain/response';
import {
	milestonesOf,
	telescopeMilestones,
	type ResponseEntry,
	type ResponseStory
} from './responseStory';
import { csvField } from '../export/csvTable';
import { stepTime, waitForExposure } from './stepTimes';

const story = (
	...entries: [kind: ResponseEntry['kind'], atS: number, more?: Partial<ResponseEntry>][]
): ResponseStory => ({
	t0Ms: 0,
	entries: entries.map(([kind, atS, more]) => ({
		kind,
		atMs: atS * 1000,
		decision: null,
		stream: null,
		telescopeId: null,
		byPartner: false,
		...more
	}))
});
const chase = { decision: 'chase' };
const NOW_MS = 10_000_000;

describe('a step of one transient', () => {
	it('never began when what comes before it did not happen', () => {
		const milestones = milestonesOf(story(['alertReceived', 20]));
		expect(stepTime(milestones, 'takenToDecision', NOW_MS)).toBeNull();
		expect(stepTime(milestones, 'claimToExposure', NOW_MS)).toBeNull();
	});

	it('ends unanswered where the transient is dropped, and does not count as still open', () => {
		const milestones = milestonesOf(
			story(
				['alertReceived', 20],
				['taken', 50],
				['decided', 100, chase],
				['slotClaimed', 200],
				['decided', 800, { decision: 'drop' }]
			)
		);
		expect(stepTime(milestones, 'claimToExposure', NOW_MS)).toEqual({
			time: 600,
			ended: false,
			stillOpen: false
		});
		expect(waitForExposure(milestones, NOW_MS)).toMatchObject({ time: 800, ended: false });
	});

	it('goes on when what was parked is chased after all', () => {
		const milestones = milestonesOf(
			story(
				['alertReceived', 20],
				['taken', 50],
				['decided', 100, { decision: 'park' }],
				['decided', 1000, chase],
				['slotClaimed', 1300]
			)
		);
		expect(stepTime(milestones, 'takenToDecision', NOW_MS)).toMatchObject({ time: 50 });
		expect(stepTime(milestones, 'decisionToClaim', NOW_MS)).toMatchObject({
			time: 300,
			ended: true
		});
		expect(stepTime(milestones, 'claimToExposure', NOW_MS)).toEqual({
			time: NOW_MS / 1000 - 1300,
			ended: false,
			stillOpen: true
		});
	});

	it('has not ended when what ends it came after the transient was closed', () => {
		const milestones = milestonesOf(story(['alertReceived', 20], ['closed', 500], ['onSky', 900]));
		expect(waitForExposure(milestones, NOW_MS)).toEqual({
			time: 500,
			ended: false,
			stillOpen: true
		});
	});

	it('takes no time when a clock that runs ahead stamped T0 after it was received', () => {
		const milestones = milestonesOf(story(['alertReceived', -2]));
		expect(stepTime(milestones, 'triggerToReceived', NOW_MS)).toMatchObject({
			time: 0,
			ended: true
		});
	});

	it('stops for a telescope that gave its claim back', () => {
		const one = { telescopeId: 'one' };
		const two = { telescopeId: 'two' };
		const told = story(
			['alertReceived', 20],
			['decided', 100, chase],
			['slotClaimed', 200, one],
			['slotReleased', 500, one],
			['slotClaimed', 600, two],
			['onSky', 900, two]
		);
		expect(stepTime(telescopeMilestones(told, 'one'), 'claimToExposure', NOW_MS)).toEqual({
			time: 300,
			ended: false,
			stillOpen: false
		});
		expect(stepTime(telescopeMilestones(told, 'two'), 'claimToExposure', NOW_MS)).toMatchObject({
			time: 300,
			ended: true
		});
	});
});

describe('how times and fields are written', () => {
	it.each([
		[22, '0m 22s'],
		[665, '11m 05s'],
		[899.6, '15m'],
		[2280, '38m'],
		[3599, '1h 00m'],
		[13_200, '3h 40m'],
		[187_200, '2d 04h']
	])('%d s as %s', (seconds, words) => {
		expect(formatStepTime(seconds)).toBe(words);
	});

	it.each([
		['plain', 'plain'],
		['a,b', '"a,b"'],
		['say "hi"', '"say ""hi"""'],
		['two\nlines', '"two\nlines"'],
		['=1+1', "'=1+1"],
		['@SUM(A1)', "'@SUM(A1)"],
		['-2', "'-2"]
	])('the field %s as %s', (value, field) => {
		expect(csvField(value)).toBe(field);
	});
});
