import { z } from 'zod';
import {
	boardSchema,
	regionOutlineSchema,
	skySearchAnswerSchema
} from '../../domain/answers/boardAnswer';
import { instant } from '../../domain/answers/commonAnswers';
import { transientRecordSchema } from '../../domain/answers/transientRecord';
import { decisionSchema } from '../../domain/decision';
import { regionVersionSchema } from '../../domain/regionOutline';
import { mergeSchema } from '../../domain/regroup';
import { skySearchSchema } from '../../domain/skySearch';
import { DECISIONS } from '../../domain/vocabulary';
import type { Operation } from './operation';
import { csvFile, file, json, movedTo, votableFile } from './answerParts';

const at = '/transients/{designation}';

const taken = {
	name: 'Taken',
	schema: z.object({ designation: z.string(), takenAt: instant })
};
const decided = {
	name: 'Decided',
	schema: z.object({ designation: z.string(), decision: z.enum(DECISIONS), decidedAt: instant })
};

const moc = z.object({
	format: z.enum(['fits', 'json', 'ascii']).default('fits').describe('How the coverage is written')
});

export const TRANSIENT_OPERATIONS: Operation[] = [
	{
		method: 'GET',
		path: '/board',
		noun: 'Board',
		summary: 'All open transients with regions, outlooks, slots and reports, costliest wait first',
		guard: 'viewBoard',
		query: z.object({
			since: z.coerce
				.number()
				.int()
				.default(0)
				.describe('Only transients changed after this revision')
		}),
		answers: [
			json(200, 'The board', { name: 'Board', schema: boardSchema }),
			{ status: 304, says: 'Nothing changed since the revision in If-None-Match' }
		]
	},
	{
		method: 'GET',
		path: '/transients',
		noun: 'Transients',
		summary: 'Transients whose joint region touches a patch of sky',
		guard: 'viewTransients',
		query: skySearchSchema,
		answers: [
			json(200, 'Transients', { name: 'TouchingTransients', schema: skySearchAnswerSchema })
		],
		problems: ['invalid']
	},
	{
		method: 'GET',
		path: at,
		noun: 'Transients',
		summary: 'Everything about one transient',
		guard: 'viewTransients',
		answers: [json(200, 'The transient', { name: 'Transient', schema: transientRecordSchema })],
		problems: ['notFound']
	},
	{
		method: 'POST',
		path: `${at}/take`,
		noun: 'Transients',
		summary: 'Take it: acknowledge the alert and own the decision',
		guard: 'takeTransient',
		answers: [
			json(200, 'Taken', taken, { designation: 'D26L01-b', takenAt: '2026-12-01T03:46:05Z' })
		],
		problems: ['notFound', 'alreadyTaken']
	},
	{
		method: 'POST',
		path: `${at}/decision`,
		noun: 'Transients',
		summary: 'Decide: chase, park or drop',
		guard: 'decideTransient',
		bodies: [
			{
				mediaType: 'application/json',
				content: { name: 'Decision', schema: decisionSchema },
				description: 'A changed decision needs a reason.',
				examples: { chase: { decision: 'chase', reason: 'High and dark for two telescopes.' } }
			}
		],
		answers: [
			json(200, 'Decided', decided, {
				designation: 'D26L01-b',
				decision: 'chase',
				decidedAt: '2026-12-01T03:47:30Z'
			})
		],
		problems: ['notFound', 'wrongState', 'invalid']
	},
	{
		method: 'POST',
		path: `${at}/merge`,
		noun: 'Transients',
		summary: 'Put all its alerts into another transient',
		guard: 'regroupAlerts',
		bodies: [
			{
				mediaType: 'application/json',
				content: { name: 'Merge', schema: mergeSchema },
				examples: { merge: { into: 'D26L01-a' } }
			}
		],
		answers: [movedTo('The transient that has them now')],
		problems: ['notFound', 'wrongState', 'invalid']
	},
	{
		method: 'GET',
		path: `${at}/region`,
		noun: 'Transients',
		summary: 'Outlines of the joint region’s 50 % and 90 % areas, to draw',
		guard: 'viewBoard',
		query: regionVersionSchema,
		answers: [
			json(200, 'Outlines', { name: 'RegionOutline', schema: regionOutlineSchema }),
			{ status: 304, says: 'The version in If-None-Match is the one in force' }
		],
		problems: ['notFound', 'invalid']
	},
	{
		method: 'GET',
		path: `${at}/region.moc`,
		noun: 'Transients',
		summary: 'The joint region as a coverage map (IVOA MOC 2.0)',
		guard: 'viewTransients',
		query: moc,
		answers: [
			file('application/fits', 'With format=fits'),
			file('application/json', 'With format=json'),
			file('text/plain', 'With format=ascii')
		],
		problems: ['notFound', 'invalid']
	},
	{
		method: 'GET',
		path: `${at}/region.fits`,
		noun: 'Transients',
		summary: 'The joint region as a HEALPix probability map',
		guard: 'viewTransients',
		answers: [file('application/fits', 'The map')],
		problems: ['notFound']
	},
	{
		method: 'GET',
		path: `${at}/voevent`,
		noun: 'Transients',
		summary: 'The transient as a VOEvent 2.0 packet',
		guard: 'viewTransients',
		answers: [file('application/voevent+xml', 'The packet')],
		problems: ['notFound']
	},
	{
		method: 'GET',
		path: `${at}/outlook.csv`,
		noun: 'Transients',
		summary: 'The ranked outlook as CSV',
		guard: 'viewTransients',
		answers: [csvFile('One line a telescope, times in ISO 8601 UTC, empty where not known')],
		problems: ['notFound']
	},
	{
		method: 'GET',
		path: `${at}/outlook.vot`,
		noun: 'Transients',
		summary: 'The ranked outlook as VOTable 1.4',
		guard: 'viewTransients',
		answers: [votableFile('The same columns with units and UCDs')],
		problems: ['notFound']
	}
];
