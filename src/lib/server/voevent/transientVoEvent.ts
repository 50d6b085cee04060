import { and, asc, desc, eq, inArray } from 'drizzle-orm';
import type { StreamClass } from '../../domain/vocabulary';
import { formatArea } from '../../domain/area';
import { requirePermission, type Actor } from '../actor';
import { alertColumns, type AlertWithoutSky } from '../alerts/alertSky';
import type { App } from '../app';
import { alert, stream } from '../db/schema/alerts';
import { journal, region } from '../db/schema/transients';
import { DomainError } from '../domainError';
import { requireTransient, type TransientRow } from '../transients/transientStore';
import { ownIvorns, type OwnIvorns } from './ownIvorns';
import { voEventDocument, type VoEvent, type VoEventParam } from './voEventDocument';

type RegionRow = typeof region.$inferSelect;
type Part = { alert: AlertWithoutSky; streamCode: string; streamClass: StreamClass };

/** UCD1+ words for what each class of instrument sees. */
const CONCEPTS: Record<StreamClass, string> = {
	gamma: 'process.variation.burst;em.gamma',
	wideXray: 'process.variation.burst;em.X-ray',
	narrowXray: 'process.variation.burst;em.X-ray'
};

/**
 * A transient as a VOEvent 2.0: its joint region in force, or, when none of its alerts is live any more, a
 * retraction. Each version of the region has an IVORN of its own and supersedes the one before, so that one
 * IVORN always means the same content.
 */
export async function transientVoEvent(
	app: App,
	actor: Actor | null,
	designation: string
): Promise<{ ivorn: string; document: string }> {
	requirePermission(actor, 'viewTransients');
	const row = await requireTransient(app.database, designation);
	const parts = await partsOf(app, row);
	const live = parts.filter((part) => part.alert.live);
	const own = ownIvorns(app.config.origin, designation);
	const event =
		live.length > 0
			? await reportOf(app, row, live, own)
			: await retractionOf(app, row, parts, own);
	return { ivorn: event.ivorn, document: voEventDocument(event) };
}

async function partsOf(app: App, row: TransientRow): Promise<Part[]> {
	return app.database
		.select({ alert: alertColumns, streamCode: stream.code, streamClass: stream.streamClass })
		.from(alert)
		.innerJoin(stream, eq(stream.id, alert.streamId))
		.where(eq(alert.transientId, row.id))
		.orderBy(asc(alert.receivedAt), asc(alert.id));
}

async function reportOf(
	app: App,
	row: TransientRow,
	live: Part[],
	own: OwnIvorns
): Promise<VoEvent> {
	const [found] = await app.database
		.select()
		.from(region)
		.where(and(eq(region.transientId, row.id), eq(region.version, row.regionVersion)));
	if (!found) throw new DomainError('wrongState', `${row.designation} has no joint region yet.`);
	const version = row.regionVersion;
	const sources = live.flatMap((part) => citation(part, 'followup'));
	const earlier =
		version > 1 ? [{ ivorn: own.version(version - 1), relation: 'supersedes' as const }] : [];
	return {
		...shared(app, row, own),
		ivorn: own.version(version),
		date: found.computedAt,
		place: {
			t0: row.t0,
			centre: { raDeg: found.raDeg, decDeg: found.decDeg },
			radiusDeg: found.equivalentRadiusDeg
		},
		groups: [{ name: 'JointRegion', params: regionParams(found) }],
		why: {
			name: 'High-energy transient',
			concepts: [...new Set(live.map((part) => CONCEPTS[part.streamClass]))],
			description: `Made from ${live.map(nameOf).join('; ')}`,
			oneSource:
				found.logOddsAgreement === null ? null : 1 / (1 + Math.exp(-found.logOddsAgreement))
		},
		cites: [...earlier, ...sources],
		description: regionWords(row, found)
	};
}

async function retractionOf(
	app: App,
	row: TransientRow,
	parts: Part[],
	own: OwnIvorns
): Promise<VoEvent> {
	const [line] = await app.database
		.select({ at: journal.at, summary: journal.summary })
		.from(journal)
		.where(and(eq(journal.transientId, row.id), inArray(journal.kind, ['retracted', 'closed'])))
		.orderBy(desc(journal.id))
		.limit(1);
	const sources = parts.flatMap((part) =>
		citation(part, part.alert.kind === 'retraction' ? 'followup' : 'retraction')
	);
	const version = row.regionVersion;
	const earlier =
		version > 0 ? [{ ivorn: own.version(version), relation: 'retraction' as const }] : [];
	const cites = [...earlier, ...sources];
	if (!cites.some(({ relation }) => relation === 'retraction')) {
		throw new DomainError(
			'wrongState',
			`${row.designation} has no live alert, and there is nothing that could be retracted.`
		);
	}
	return {
		...shared(app, row, own),
		ivorn: own.retraction(version),
		date: line?.at ?? row.firstReceivedAt,
		place: null,
		groups: [],
		why: {
			name: 'Retracted',
			concepts: ['stat.falsealarm'],
			description: line?.summary ?? 'No live alert is left',
			oneSource: null
		},
		cites,
		description: `${mark(row)}Transient ${row.designation} is taken back: no live alert is left.`
	};
}

function shared(app: App, row: TransientRow, own: OwnIvorns) {
	return {
		role: row.isTest || row.isDrill ? ('test' as const) : ('observation' as const),
		authorIvorn: own.author,
		page: `${app.config.origin}/transients/${row.designation}`,
		params: [
			{
				name: 'designation',
				value: row.designation,
				ucd: 'meta.id',
				description: 'The transient’s designation'
			}
		]
	};
}

function citation({ alert: row }: Part, relation: 'followup' | 'retraction') {
	return /^ivo:\/\//i.test(row.packetId) ? [{ ivorn: row.packetId, relation }] : [];
}

function nameOf({ alert: row, streamCode }: Part): string {
	return `${streamCode} ${row.packetId}${row.serial > 1 ? `, serial ${row.serial}` : ''}`;
}

function regionParams(row: RegionRow): VoEventParam[] {
	const odds = row.logOddsAgreement;
	return [
		{
			name: 'containment',
			value: 0.9,
			ucd: 'stat.probability',
			description: 'Share of the probability that Error2Radius stands for'
		},
		{ name: 'area_90', value: row.area90Deg2, unit: 'deg2', ucd: 'phys.angArea' },
		{ name: 'area_50', value: row.area50Deg2, unit: 'deg2', ucd: 'phys.angArea' },
		{ name: 'alerts', value: row.alertCount, dataType: 'int', ucd: 'meta.number' },
		{ name: 'reports_of_nothing', value: row.notFoundCount, dataType: 'int', ucd: 'meta.number' },
		...(odds === null
			? []
			: [
					{
						name: 'agreement_log10_odds',
						value: odds / Math.LN10,
						ucd: 'stat.likelihood',
						description: 'Odds that the alerts come from one source, as a power of ten'
					}
				])
	];
}

function regionWords(row: TransientRow, found: RegionRow): string {
	const apart =
		found.method === 'none'
			? ' The alerts do not overlap: it is not one patch around its centre.'
			: '';
	return (
		`${mark(row)}Joint region of transient ${row.designation}, version ${found.version}: ${formatArea(found.area90Deg2)} at 90 %. ` +
		`Error2Radius is the radius of a circle with that area.${apart} ` +
		'T0 is the earliest of the live alerts, as observed, not brought to the Earth’s centre.'
	);
}

function mark(row: TransientRow): string {
	return row.isDrill ? 'Drill. ' : row.isTest ? 'Test. ' : '';
}
