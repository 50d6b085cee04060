import { z } from 'zod';
import { alertPacketSchema } from '../../domain/alertPacket';
import { ID_EXAMPLE } from '../../domain/answers/exampleValues';
import { notedSchema, overlappingSchema, receiptSchema } from '../../domain/answers/otherAnswers';
import { membershipSchema } from '../../domain/regroup';
import type { Operation } from './operation';
import { PACKET_EXAMPLES, VOEVENT_EXAMPLE } from './packetExamples';
import { json, movedTo } from './answerParts';

const receipt = { name: 'Receipt', schema: receiptSchema };
const receiptExample = {
	alertId: ID_EXAMPLE,
	stream: 'tambour',
	packetId: 'TB-1',
	serial: 1,
	designation: 'D26L01-b',
	receivedAt: '2026-12-01T03:41:52.118Z'
};

const VOEVENT = {
	content: undefined,
	description:
		'A VOEvent 2.0 packet of the IVOA. Which Params hold significance, false-alarm rate and systematic error, and the containment of its error radius, is set for each stream.',
	examples: { voevent: VOEVENT_EXAMPLE }
};

const fileForm = z.object({
	packet: z.string().describe('The packet as JSON, without shape'),
	file: z
		.string()
		.describe(
			'The region: a HEALPix map in FITS, or a coverage map (MOC) in FITS, JSON or ASCII; gzip is fine; at most 64 MiB'
		)
});

export const ALERT_OPERATIONS: Operation[] = [
	{
		method: 'POST',
		path: '/alerts',
		noun: 'Alerts',
		summary: 'Send a packet; the same packet twice is one alert',
		guard: 'key',
		bodies: [
			{
				mediaType: 'application/json',
				content: { name: 'AlertPacket', schema: alertPacketSchema },
				description: 'The packet of our own, at most 256 KiB.',
				examples: PACKET_EXAMPLES
			},
			{ mediaType: 'application/voevent+xml', ...VOEVENT },
			{
				mediaType: 'application/xml',
				description: 'The same, for senders that can’t say it better.'
			},
			{ mediaType: 'text/xml', description: 'The same.' },
			{
				mediaType: 'multipart/form-data',
				content: { name: 'PacketWithFile', schema: fileForm },
				description: 'A packet whose region is in a file.'
			}
		],
		answers: [
			json(201, 'A new alert', receipt, receiptExample),
			json(200, 'A copy of one that is known: the receipt of the first', receipt, receiptExample),
			json(
				202,
				'Kept, but no alert',
				{ name: 'Noted', schema: notedSchema },
				{
					noted: 'It is a utility packet.'
				}
			)
		],
		problems: [
			'notSignedIn',
			'invalid',
			'malformedBody',
			'unsupportedMediaType',
			'bodyTooLarge',
			'packetConflict',
			'tooManyRequests',
			'unavailable'
		]
	},
	{
		method: 'POST',
		path: '/alerts/{id}/membership',
		noun: 'Alerts',
		summary:
			'Say where an alert belongs: it stays, gets a transient of its own, or goes to another',
		guard: 'regroupAlerts',
		bodies: [
			{
				mediaType: 'application/json',
				content: { name: 'Membership', schema: membershipSchema },
				examples: {
					confirm: { action: 'confirm' },
					split: { action: 'split' },
					move: { action: 'move', to: 'D26L01-a' }
				}
			}
		],
		answers: [movedTo('The transient it is in now')],
		problems: ['notFound', 'wrongState', 'invalid']
	},
	{
		method: 'GET',
		path: '/alerts/{id}/overlapping',
		noun: 'Alerts',
		summary: 'Alerts whose own 90 % area overlaps this one’s',
		guard: 'viewTransients',
		answers: [json(200, 'Alerts', { name: 'Overlapping', schema: overlappingSchema })],
		problems: ['notFound']
	}
];
