import { FILTER_BANDS_NM } from '../../domain/filterBands';
import type { Observation } from './observationStore';
import { fieldDiameterDeg, fieldRegion } from './fieldRegion';
import type { ExportTable, TableColumn } from './tableColumn';

/** Modified Julian Date of an instant: JD - 2400000.5, in UTC days of 86 400 s; to 0.1 ms. */
export function modifiedJulianDate(at: Date): number {
	return Number((at.getTime() / 86_400_000 + 40_587).toFixed(9));
}

const NM = 1e-9;
/** Without the tail that a product with 1e-9 has. */
const metres = (nm: number | undefined) =>
	nm === undefined ? null : Number((nm * NM).toPrecision(6));
const unknown = () => null;

/**
 * Pointings with the columns of IVOA ObsLocTAP 1.0 (table 4), in its order: names, types, units and UCDs are its own.
 * How our slots' states become `execution_status` is in `executionStatus`. `t_exptime` is what a report says, so
 * that it stays empty until something was measured; `t_plan_exptime` is the plan's. What is not known is empty.
 */
export function observationTable(rows: Observation[]): ExportTable<Observation> {
	return {
		name: 'obsplan',
		description:
			'Planned and performed observations. The site’s own limits and its safety officer decide.',
		facts: [],
		columns: COLUMNS,
		rows
	};
}

const column = (
	name: string,
	datatype: TableColumn<Observation>['datatype'],
	about: Pick<TableColumn<Observation>, 'unit' | 'ucd' | 'frame'>,
	description: string,
	value: TableColumn<Observation>['value']
): TableColumn<Observation> => ({ name, datatype, ...about, description, value });

// prettier-ignore
const COLUMNS: TableColumn<Observation>[] = [
	column('t_planning', 'double', { unit: 'd', frame: 'mjd' }, 'When it was last changed in the plan, MJD', (row) => modifiedJulianDate(row.plannedAt)),
	column('target_name', 'char', { ucd: 'meta.id;src' }, 'Designation of the transient', (row) => row.designation),
	column('obs_id', 'char', { ucd: 'meta.id' }, 'Slot and number of the tile in its plan', (row) => row.obsId),
	column('obs_collection', 'char', { ucd: 'meta.id' }, 'Duskline, or the drill or test it belongs to', (row) => row.isDrill ? 'Duskline drill' : row.isTest ? 'Duskline test' : 'Duskline'),
	column('s_ra', 'double', { unit: 'deg', ucd: 'pos.eq.ra', frame: 'icrs' }, 'Right ascension of the pointing, ICRS', (row) => row.tile.centre.raDeg),
	column('s_dec', 'double', { unit: 'deg', ucd: 'pos.eq.dec', frame: 'icrs' }, 'Declination of the pointing, ICRS', (row) => row.tile.centre.decDeg),
	column('s_fov', 'double', { unit: 'deg', ucd: 'phys.angSize;instr.fov' }, 'Diameter of the circle about the pointing that holds the field', (row) => Number(fieldDiameterDeg(row.tile, row.telescope.detectors).toFixed(6))),
	column('s_region', 'char', { ucd: 'pos.outline;obs.field' }, 'Field on the sky, STC-S, ICRS', (row) => fieldRegion(row.tile, row.telescope.detectors)),
	column('s_resolution', 'double', { unit: 'arcsec', ucd: 'pos.angResolution' }, 'Not recorded', unknown),
	column('t_min', 'double', { unit: 'd', ucd: 'time.start;obs.exposure', frame: 'mjd' }, 'Start of the exposure, MJD', (row) => modifiedJulianDate(row.start)),
	column('t_max', 'double', { unit: 'd', ucd: 'time.end;obs.exposure', frame: 'mjd' }, 'End of the exposure, MJD', (row) => modifiedJulianDate(row.end)),
	column('t_exptime', 'double', { unit: 's', ucd: 'time.duration;obs.exposure' }, 'Exposure as reported', (row) => row.exposureS),
	column('t_resolution', 'double', { unit: 's', ucd: 'time.resolution' }, 'Not recorded', unknown),
	column('em_min', 'double', { unit: 'm', ucd: 'em.wl;stat.min' }, 'Shortest wavelength of the filter', (row) => metres(FILTER_BANDS_NM[row.filter]?.fromNm)),
	column('em_max', 'double', { unit: 'm', ucd: 'em.wl;stat.max' }, 'Longest wavelength of the filter', (row) => metres(FILTER_BANDS_NM[row.filter]?.toNm)),
	column('em_res_power', 'double', {}, 'Not recorded', unknown),
	column('o_ucd', 'char', { ucd: 'meta.ucd' }, 'What is measured', () => 'phot.flux.density'),
	column('pol_states', 'char', { ucd: 'meta.code;phys.polarization' }, 'Empty: no polarisation is measured', unknown),
	column('pol_xel', 'int', {}, 'Empty: no polarisation is measured', unknown),
	column('facility_name', 'char', { ucd: 'meta.id;instr.tel' }, 'Telescope', (row) => row.telescope.name),
	column('instrument_name', 'char', { ucd: 'meta.id;instr' }, 'Not recorded', unknown),
	column('t_plan_exptime', 'double', { unit: 's', ucd: 'time.duration;obs.exposure' }, 'Exposure as planned', (row) => row.tile.exposureS),
	column('category', 'char', {}, 'Not recorded', unknown),
	column('priority', 'int', {}, 'Not recorded', unknown),
	column('execution_status', 'char', {}, 'Planned, Scheduled, Unscheduled, Performed or Aborted', (row) => row.status),
	column('tracking_type', 'char', {}, 'Not recorded', unknown)
];
