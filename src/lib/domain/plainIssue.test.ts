import { expect, it } from 'vitest';
import { alertPacketSchema } from './alertPacket';
import { plainIssue } from './plainIssue';

const wrong = (packet: Record<string, unknown>) =>
	Object.fromEntries(
		alertPacketSchema
			.safeParse(packet, { error: plainIssue })
			.error!.issues.map(({ path, message }) => [path.join('/'), message])
	);

it('says what is wrong with a packet in plain words', () => {
	expect(
		wrong({
			packetId: 'TB-1',
			serial: 0,
			role: 'drill',
			cites: {},
			t0: '2026-12-01T03:41:27Z',
			shape: {
				kind: 'circle',
				centre: { raDeg: 'east', decDeg: -91 },
				radiusDeg: 0,
				containment: 90
			},
			remarks: 'x'.repeat(4001)
		})
	).toEqual({
		serial: 'must be at least 1',
		role: 'must be one of observation, test',
		kind: 'must be one of report, update, retraction',
		cites: 'must be an array',
		'shape/centre/raDeg': 'must be a number',
		'shape/centre/decDeg': 'must be at least −90',
		'shape/radiusDeg': 'must be more than 0',
		'shape/containment': 'must be between 0 and 1: the share of the probability inside the radius',
		remarks: 'must have at most 4000 characters'
	});
	expect(wrong({})).toMatchObject({ packetId: 'is needed', serial: 'is needed' });
});
