import type { ReportKind, SlotState } from '../../domain/vocabulary';

export type ExecutionStatus = 'Planned' | 'Scheduled' | 'Unscheduled' | 'Performed' | 'Aborted';

/**
 * A slot's state in the words of IVOA ObsLocTAP 1.0 (section 2, execution_status). Offered is Planned: nobody has the
 * telescope yet. Claimed and on sky are Scheduled, as nothing is known to have been done until a report says so.
 * Reported is Performed when a report that stands has a measurement, else Aborted (lost to weather or a fault; or all reports
 * withdrawn). Released is Aborted when it had been on sky, else Unscheduled; lapsed is Unscheduled.
 */
export function executionStatus(
	state: SlotState,
	{ wasOnSky, reportKinds }: { wasOnSky: boolean; reportKinds: ReportKind[] }
): ExecutionStatus {
	switch (state) {
		case 'offered':
			return 'Planned';
		case 'claimed':
		case 'on sky':
			return 'Scheduled';
		case 'reported':
			return reportKinds.some((kind) => kind === 'detection' || kind === 'limit')
				? 'Performed'
				: 'Aborted';
		case 'released':
			return wasOnSky ? 'Aborted' : 'Unscheduled';
		case 'lapsed':
			return 'Unscheduled';
	}
}
