import { z } from 'zod';
import type { BoardOutlook, BoardOutlookRow } from '../board';
import { instant, position, share } from './commonAnswers';

const limitName = z.enum([
	'sun',
	'altitude',
	'horizon',
	'zenith',
	'hourAngle',
	'declination',
	'moon',
	'sunDistance',
	'closure',
	'start',
	'end'
]);

export const outlookRowSchema = z.object({
	telescopeCode: z.string(),
	catch: share.describe('Chance to detect the fading counterpart with the tile plan'),
	reach: share.describe('Share of the region that can be observed in the windows'),
	opensAt: instant.nullable().describe('Start of the window that is open or opens next'),
	windows: z.array(
		z.object({
			startAt: instant,
			endAt: instant,
			opensBy: limitName.describe('The limit that opens it'),
			endsBy: limitName.describe('The limit that ends it')
		})
	),
	whyNot: z.string().nullable().describe('In words, why it can’t observe; null when it can'),
	forbidden: z
		.object({
			limit: limitName,
			missingDeg: z.number().nullable(),
			at: instant.nullable()
		})
		.nullable(),
	atOpening: z
		.object({
			altDeg: z.number(),
			azDeg: z.number().describe('From north through east'),
			airmass: z.number(),
			moonDistanceDeg: z.number(),
			moonAltDeg: z.number(),
			moonIlluminated: share,
			sunDistanceDeg: z.number(),
			limitMag: z.number().describe('Faintest magnitude of a tile, 5 sigma')
		})
		.nullable()
		.describe('Of the region’s centre when the window opens'),
	tiles: z.array(
		z.object({
			centre: position,
			rotationDeg: z.number().describe('Of the field, north through east'),
			startAt: instant,
			exposureS: z.number(),
			probability: share.describe('Share of the region inside'),
			detectChance: share.describe('If the source is there')
		})
	)
}) satisfies z.ZodType<Omit<BoardOutlookRow, 'strip'>>;

export const outlookSchema = z.object({
	computedAt: instant,
	regionVersion: z.number().int(),
	networkCatch: share.describe('Of all telescopes together'),
	costOfWaitingPoints: z.number().describe('Points of network catch that an hour’s delay loses'),
	fade: z
		.object({
			m1Mean: z.number().describe('Magnitude one hour after T0'),
			m1Spread: z.number(),
			alpha: z.number().describe('Power with which the light fades'),
			streamName: z.string()
		})
		.nullable(),
	order: z.array(z.string()).describe('Telescope codes in the order that adds most catch'),
	rows: z.array(outlookRowSchema).describe('Best first')
}) satisfies z.ZodType<Omit<BoardOutlook, 'rows'>>;
