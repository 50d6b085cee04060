import { slotListSchema } from '../../domain/answers/boardAnswer';
import { observationQuerySchema } from '../../domain/observationQuery';
import { claimSchema, reportSchema, withdrawSchema } from '../../domain/slot';
import type { Operation } from './operation';
import { csvFile, json, reportAnswer, slotAnswer, votableFile } from './answerParts';

const OBSERVATIONS =
	'One row a tile with the columns of IVOA ObsLocTAP 1.0; without from or designation, of the last 30 days and all to come';

export const SLOT_OPERATIONS: Operation[] = [
	{
		method: 'GET',
		path: '/observations.csv',
		noun: 'Observations',
		summary: 'Planned and performed observations as CSV',
		guard: 'viewSlots',
		query: observationQuerySchema,
		answers: [csvFile(OBSERVATIONS)],
		problems: ['invalid', 'notFound']
	},
	{
		method: 'GET',
		path: '/observations.vot',
		noun: 'Observations',
		summary: 'Planned and performed observations as VOTable 1.4',
		guard: 'viewSlots',
		query: observationQuerySchema,
		answers: [votableFile(OBSERVATIONS)],
		problems: ['invalid', 'notFound']
	},
	{
		method: 'GET',
		path: '/slots',
		noun: 'Slots',
		summary: 'Slots from a day ago onwards, by start',
		guard: 'viewSlots',
		answers: [json(200, 'Slots', { name: 'SlotList', schema: slotListSchema })]
	},
	{
		method: 'POST',
		path: '/slots',
		noun: 'Slots',
		summary: 'Claim a telescope you work with; its site’s own limits and its safety officer decide',
		guard: 'claimSlot',
		bodies: [
			{
				mediaType: 'application/json',
				content: { name: 'Claim', schema: claimSchema },
				examples: {
					claim: {
						designation: 'D26L01-b',
						telescopeCode: 'ALM',
						startAt: '2026-12-01T04:20:00Z',
						endAt: '2026-12-01T05:10:00Z',
						filter: 'R'
					}
				}
			}
		],
		answers: [slotAnswer(201, 'Claimed')],
		problems: ['notFound', 'slotTaken', 'unsafePointing', 'wrongState', 'invalid']
	},
	{
		method: 'POST',
		path: '/slots/{id}/on-sky',
		noun: 'Slots',
		summary: 'Say that the first exposure begins',
		guard: 'claimSlot',
		answers: [slotAnswer(200, 'On sky')],
		problems: ['notFound', 'wrongState']
	},
	{
		method: 'POST',
		path: '/slots/{id}/release',
		noun: 'Slots',
		summary: 'Give a claim back',
		guard: 'releaseSlot',
		answers: [slotAnswer(200, 'Released')],
		problems: ['notFound', 'wrongState']
	},
	{
		method: 'POST',
		path: '/slots/{id}/report',
		noun: 'Reports',
		summary: 'Report what came of a slot',
		guard: 'reportSlot',
		bodies: [
			{
				mediaType: 'application/json',
				content: { name: 'Report', schema: reportSchema },
				examples: {
					detection: {
						kind: 'detection',
						filter: 'R',
						observedAt: '2026-12-01T04:31:00Z',
						exposureS: 120,
						magnitude: 18.42,
						magnitudeError: 0.05,
						raDeg: 83.4021,
						decDeg: -8.1933
					},
					limit: {
						kind: 'limit',
						filter: 'R',
						observedAt: '2026-12-01T04:31:00Z',
						exposureS: 120,
						limitMag: 20.6
					},
					weather: {
						kind: 'weather',
						observedAt: '2026-12-01T04:31:00Z',
						remarks: 'Cloud came in.'
					}
				}
			}
		],
		answers: [reportAnswer(201, 'Recorded')],
		problems: ['notFound', 'wrongState', 'invalid']
	},
	{
		method: 'POST',
		path: '/reports/{id}/withdraw',
		noun: 'Reports',
		summary: 'Take a report back; it stays in the journal and counts nowhere',
		guard: 'withdrawReport',
		bodies: [
			{
				mediaType: 'application/json',
				content: { name: 'Withdrawal', schema: withdrawSchema },
				examples: { withdraw: { reason: 'Wrong field.' } }
			}
		],
		answers: [reportAnswer(200, 'Withdrawn')],
		problems: ['notFound', 'wrongState', 'invalid']
	}
];
