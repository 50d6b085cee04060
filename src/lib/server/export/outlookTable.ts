import type { BoardOutlookRow, BoardTelescope } from '../../domain/board';
import type { TransientDetail } from '../transients/transientDetail';
import type { ExportTable, TableColumn } from './tableColumn';

type OutlookLine = {
	rank: number;
	row: BoardOutlookRow;
	telescope: BoardTelescope | undefined;
	centre: { raDeg: number; decDeg: number } | null;
};

/** The ranked outlook of a transient: one row a telescope, those that never can at the end with the reason. */
export function outlookTable(detail: TransientDetail): ExportTable<OutlookLine> {
	const { transient, telescopes } = detail;
	const { outlook, region, designation } = transient;
	const rows = outlook?.rows ?? [];
	const state = transient.isDrill ? 'drill' : transient.isTest ? 'test' : 'observation';
	return {
		name: 'outlook',
		description: `Telescopes for ${designation}, ranked by the chance to catch its counterpart. The site's own limits and its safety officer decide.`,
		facts: [
			{ name: 'designation', value: designation },
			{ name: 'role', value: state },
			{ name: 't0', value: transient.t0 },
			...(outlook
				? [
						{ name: 'computed_at', value: outlook.computedAt },
						{ name: 'region_version', value: String(outlook.regionVersion) },
						{ name: 'network_catch', value: String(outlook.networkCatch) },
						{ name: 'cost_of_waiting_points', value: String(outlook.costOfWaitingPoints) }
					]
				: [])
		],
		columns: COLUMNS,
		rows: rows.map((row, i) => ({
			rank: i + 1,
			row,
			telescope: telescopes.find(({ code }) => code === row.telescopeCode),
			centre: region?.centre ?? null
		}))
	};
}

const double = (column: Omit<TableColumn<OutlookLine>, 'datatype'>) =>
	({ ...column, datatype: 'double' }) as const;
const text = (column: Omit<TableColumn<OutlookLine>, 'datatype'>) =>
	({ ...column, datatype: 'char' }) as const;
const instant = (
	name: string,
	ucd: string,
	description: string,
	value: TableColumn<OutlookLine>['value']
) => text({ name, ucd, frame: 'iso', description, value });

/** The window that is open or opens next. */
const next = ({ row }: OutlookLine) =>
	row.windows.find(({ endAt }) => row.opensAt !== null && endAt > row.opensAt) ?? null;

const COLUMNS: TableColumn<OutlookLine>[] = [
	{
		name: 'rank',
		datatype: 'int',
		ucd: 'meta.number',
		description: 'Place in the ranking, 1 is best',
		value: ({ rank }) => rank
	},
	text({
		name: 'telescope_code',
		ucd: 'meta.id;instr.tel',
		description: 'Three letters of the telescope',
		value: ({ row }) => row.telescopeCode
	}),
	text({
		name: 'telescope',
		ucd: 'meta.id;instr.tel',
		description: 'Name of the telescope',
		value: ({ telescope }) => telescope?.name ?? null
	}),
	text({
		name: 'site',
		ucd: 'meta.id;pos',
		description: 'Where it stands',
		value: ({ telescope }) => telescope?.site ?? null
	}),
	double({
		name: 'ra',
		unit: 'deg',
		ucd: 'pos.eq.ra',
		frame: 'icrs',
		description: 'Right ascension of the centre of the joint region',
		value: ({ centre }) => centre?.raDeg ?? null
	}),
	double({
		name: 'dec',
		unit: 'deg',
		ucd: 'pos.eq.dec',
		frame: 'icrs',
		description: 'Declination of the centre of the joint region',
		value: ({ centre }) => centre?.decDeg ?? null
	}),
	double({
		name: 'catch',
		ucd: 'stat.probability',
		description: 'Chance to detect the fading counterpart with the tile plan, 0 to 1',
		value: ({ row }) => row.catch
	}),
	double({
		name: 'reach',
		ucd: 'stat.probability',
		description: 'Share of the joint region that can be observed in the windows, 0 to 1',
		value: ({ row }) => row.reach
	}),
	instant(
		'opens_at',
		'time.start',
		'Start of the window that is open or opens next',
		({ row }) => row.opensAt
	),
	instant('closes_at', 'time.end', 'End of that window', (line) => next(line)?.endAt ?? null),
	{
		name: 'windows',
		datatype: 'int',
		ucd: 'meta.number',
		description: 'Number of windows in the next 24 hours',
		value: ({ row }) => row.windows.length
	},
	double({
		name: 'altitude',
		unit: 'deg',
		ucd: 'pos.az.alt',
		description:
			'Altitude of the centre when the window opens, or now if it is open; no refraction',
		value: ({ row }) => row.atOpening?.altDeg ?? null
	}),
	double({
		name: 'azimuth',
		unit: 'deg',
		ucd: 'pos.az.azi',
		description: 'Azimuth then, from north through east',
		value: ({ row }) => row.atOpening?.azDeg ?? null
	}),
	double({
		name: 'airmass',
		ucd: 'obs.airMass',
		description: 'Airmass then',
		value: ({ row }) => row.atOpening?.airmass ?? null
	}),
	double({
		name: 'sun_distance',
		unit: 'deg',
		ucd: 'pos.angDistance',
		description: 'Distance of the centre from the Sun then',
		value: ({ row }) => row.atOpening?.sunDistanceDeg ?? null
	}),
	double({
		name: 'moon_distance',
		unit: 'deg',
		ucd: 'pos.angDistance',
		description: 'Distance of the centre from the Moon then',
		value: ({ row }) => row.atOpening?.moonDistanceDeg ?? null
	}),
	double({
		name: 'limit_mag',
		unit: 'mag',
		ucd: 'phot.mag;stat.max',
		description: 'Faintest magnitude of a tile then, 5 sigma',
		value: ({ row }) => row.atOpening?.limitMag ?? null
	}),
	text({
		name: 'filter',
		ucd: 'meta.id;instr.filter',
		description: 'Filter that the plan assumes',
		value: ({ telescope }) => telescope?.depth.filter ?? null
	}),
	double({
		name: 'exposure',
		unit: 's',
		ucd: 'time.duration;obs.exposure',
		description: 'Exposure of one tile',
		value: ({ telescope }) => telescope?.exposureS ?? null
	}),
	{
		name: 'tiles',
		datatype: 'int',
		ucd: 'meta.number',
		description: 'Number of tiles in the plan',
		value: ({ row }) => row.tiles.length
	},
	text({
		name: 'why_not',
		ucd: 'meta.note',
		description: 'Why it can’t observe, when it can’t',
		value: ({ row }) => row.whyNot
	})
];
