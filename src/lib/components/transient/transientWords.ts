import { sinceT0 } from '../../domain/duration';
import type {
	BoardOutlookRow,
	BoardRegion,
	BoardReport,
	BoardTelescope,
	BoardTransient
} from '../../domain/board';
import { REPORT_KIND_LABELS } from '../../domain/vocabulary';
import { canObserve } from '../band/duskBand';
import { formatShare } from '../format/formatQuantity';

/** Who triggered and who refined it, each with its time since T0, in order of arrival. */
export function heardFrom({ parts, t0 }: BoardTransient): { name: string; since: string }[] {
	return [...parts]
		.sort((a, b) => a.receivedAt.localeCompare(b.receivedAt))
		.map(({ streamName, receivedAt }) => ({
			name: streamName,
			since: sinceT0(Date.parse(receivedAt) - Date.parse(t0))
		}));
}

/** Where the decision stands, in a word or two: `not taken`, `taken by AS`, `chase`. */
export function standing({ taken, decision, reports }: BoardTransient): string {
	const words = decision
		? decision.decision
		: taken
			? `taken by ${taken.by.initials}`
			: 'not taken';
	const count = reports.length;
	return count === 0 ? words : `${words}, ${count} ${count === 1 ? 'report' : 'reports'}`;
}

/** The telescope with the greatest catch whose window is open now; rows come ranked. */
export function bestNow(transient: BoardTransient, nowMs: number): BoardOutlookRow | null {
	return (
		transient.outlook?.rows.find((row) => canObserve(transient, row.telescopeCode, nowMs)) ?? null
	);
}

/** The next telescope to open, when none is open now. */
export function nextToOpen(transient: BoardTransient, nowMs: number): BoardOutlookRow | null {
	const coming = (transient.outlook?.rows ?? []).filter(
		({ opensAt }) => opensAt !== null && Date.parse(opensAt) > nowMs
	);
	return coming.sort((a, b) => a.opensAt!.localeCompare(b.opensAt!))[0] ?? null;
}

/** Where the target stands for a telescope, in words: `alt 57°, airmass 1.19, Moon 71° away`. */
export function pointingText(row: BoardOutlookRow): string {
	if (!row.atOpening) return '';
	const { altDeg, airmass, moonDistanceDeg, moonAltDeg } = row.atOpening;
	const moon =
		moonAltDeg > 0 ? `Moon ${Math.round(moonDistanceDeg)}° away` : 'Moon below the horizon';
	return `alt ${Math.round(altDeg)}°, airmass ${airmass.toFixed(2)}, ${moon}`;
}

export function telescopeName(telescopes: readonly BoardTelescope[], code: string): string {
	return telescopes.find((telescope) => telescope.code === code)?.name ?? code;
}

/** What came of a slot in one line: `Detection, R 19.20 ± 0.05`. */
export function reportText(report: BoardReport): string {
	const kind = REPORT_KIND_LABELS[report.kind];
	const filter = report.filter ? ` ${report.filter}` : '';
	if (report.magnitude !== null) {
		const error = report.magnitudeError === null ? '' : ` ± ${report.magnitudeError.toFixed(2)}`;
		return `${kind},${filter} ${report.magnitude.toFixed(2)}${error}`;
	}
	if (report.limitMag !== null) return `${kind},${filter} > ${report.limitMag.toFixed(1)}`;
	return kind;
}

/** What looking in vain says: `2 reports of nothing are in it; 43% that it is too faint for all of them`. */
export function searchedText(searched: NonNullable<BoardRegion['searched']>): string {
	const one = searched.reports === 1;
	const reports = one
		? '1 report of nothing is in it'
		: `${searched.reports} reports of nothing are in it`;
	return `${reports}; ${formatShare(searched.tooFaintChance)} that the source is too faint for ${one ? 'it' : 'all of them'}`;
}
