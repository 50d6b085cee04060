import { z } from 'zod';
import { ID_EXAMPLE } from '../../domain/answers/exampleValues';
import {
	circularDetailSchema,
	circularDraftSchema,
	circularListSchema,
	pushDevicesSchema,
	responseSchema
} from '../../domain/answers/otherAnswers';
import { circularFilterSchema, publishSchema } from '../../domain/circular';
import { pushDeviceSchema } from '../../domain/preferences';
import { responseQuerySchema } from '../../domain/response';
import { designationSchema } from '../../domain/regroup';
import type { Operation } from './operation';
import { json } from './answerParts';

const circularNumber = { name: 'CircularNumber', schema: z.object({ number: z.number().int() }) };

export const OTHER_OPERATIONS: Operation[] = [
	{
		method: 'GET',
		path: '/circulars',
		noun: 'Circulars',
		summary: 'The archive, newest first; give olderBefore as before for the next page',
		guard: 'viewCirculars',
		query: circularFilterSchema,
		answers: [json(200, 'Circulars', { name: 'CircularList', schema: circularListSchema })],
		problems: ['invalid']
	},
	{
		method: 'POST',
		path: '/circulars',
		noun: 'Circulars',
		summary: 'Publish a circular and send it to partners; the same draft twice is one circular',
		guard: 'writeCircular',
		bodies: [
			{
				mediaType: 'application/json',
				content: { name: 'NewCircular', schema: publishSchema },
				examples: {
					circular: {
						draftId: ID_EXAMPLE,
						designation: 'D26L01-b',
						title: 'D26L01-b: optical counterpart candidate',
						body: 'We observed the position with the telescope at Cerro Almendra.'
					}
				}
			}
		],
		answers: [
			json(201, 'Published', circularNumber, { number: 12 }),
			json(200, 'This draft is out already', circularNumber, { number: 12 })
		],
		problems: ['notFound', 'wrongState', 'invalid']
	},
	{
		method: 'GET',
		path: '/circulars/{number}',
		noun: 'Circulars',
		summary: 'One published circular',
		guard: 'viewCirculars',
		answers: [json(200, 'The circular', { name: 'Circular', schema: circularDetailSchema })],
		problems: ['notFound']
	},
	{
		method: 'GET',
		path: '/circulars/draft',
		noun: 'Circulars',
		summary: 'A text from what the record holds now; nothing is kept',
		guard: 'writeCircular',
		query: z.object({ designation: designationSchema }),
		answers: [json(200, 'The draft', { name: 'CircularDraft', schema: circularDraftSchema })],
		problems: ['notFound', 'wrongState']
	},
	{
		method: 'POST',
		path: '/circulars/deliveries/{id}/retry',
		noun: 'Circulars',
		summary: 'Queue a failed delivery again',
		guard: 'retryDelivery',
		answers: [
			json(
				200,
				'Queued',
				{ name: 'DeliveryState', schema: z.object({ state: z.literal('queued') }) },
				{ state: 'queued' }
			)
		],
		problems: ['notFound', 'wrongState']
	},
	{
		method: 'GET',
		path: '/response',
		noun: 'Response',
		summary: 'How fast the team answered, by step',
		guard: 'viewResponse',
		query: responseQuerySchema,
		answers: [json(200, 'The tables', { name: 'ResponseTables', schema: responseSchema })],
		problems: ['invalid']
	},
	{
		method: 'GET',
		path: '/push-devices',
		noun: 'Push devices',
		summary: 'Your own devices',
		guard: 'setPreferences',
		answers: [json(200, 'Devices', { name: 'PushDevices', schema: pushDevicesSchema })]
	},
	{
		method: 'POST',
		path: '/push-devices',
		noun: 'Push devices',
		summary: 'Register a browser that has allowed push',
		guard: 'setPreferences',
		bodies: [
			{
				mediaType: 'application/json',
				content: { name: 'PushDevice', schema: pushDeviceSchema },
				examples: {
					device: {
						name: 'My phone',
						endpoint: 'https://push.example/send/1',
						keys: { p256dh: `B${'A'.repeat(86)}`, auth: 'A'.repeat(22) }
					}
				}
			}
		],
		answers: [
			json(
				201,
				'Registered',
				{ name: 'DeviceOnly', schema: z.object({ id: z.uuid() }) },
				{ id: ID_EXAMPLE }
			)
		],
		problems: ['invalid', 'wrongState', 'unavailable']
	},
	{
		method: 'GET',
		path: '/push-devices/key',
		noun: 'Push devices',
		summary: 'The key that a subscription is made for; null where no push is sent',
		guard: 'setPreferences',
		answers: [
			json(
				200,
				'The public VAPID key',
				{ name: 'PushKey', schema: z.object({ publicKey: z.string().nullable() }) },
				{ publicKey: null }
			)
		]
	},
	{
		method: 'DELETE',
		path: '/push-devices/{id}',
		noun: 'Push devices',
		summary: 'Take one of your own devices off the list',
		guard: 'setPreferences',
		answers: [{ status: 204, says: 'Removed' }],
		problems: ['notFound']
	},
	{
		method: 'POST',
		path: '/push-devices/{id}/test',
		noun: 'Push devices',
		summary: 'Send a test message to one of your own devices',
		guard: 'setPreferences',
		answers: [
			json(
				200,
				'Sent',
				{ name: 'Sent', schema: z.object({ sent: z.literal(true) }) },
				{ sent: true }
			)
		],
		problems: ['notFound', 'unavailable']
	},
	{
		method: 'GET',
		path: '/openapi.json',
		noun: 'Description',
		summary: 'This description, OpenAPI 3.1',
		guard: 'public',
		answers: [
			json(200, 'The document', { name: 'OpenApi', schema: z.looseObject({ openapi: z.string() }) })
		]
	}
];
