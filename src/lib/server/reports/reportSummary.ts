import { REPORT_KIND_LABELS, type ReportKind } from '../../domain/vocabulary';

type Summarised = {
	kind: ReportKind;
	filter?: string | null | undefined;
	magnitude?: number | null | undefined;
	magnitudeError?: number | null | undefined;
	limitMag?: number | null | undefined;
};

/** A report in one short phrase: "Detection, R = 19.32 ± 0.05". */
export function reportSummary(report: Summarised): string {
	const label = REPORT_KIND_LABELS[report.kind];
	if (report.kind === 'detection') {
		return `${label}, ${report.filter} = ${report.magnitude?.toFixed(2)} ± ${report.magnitudeError?.toFixed(2)}`;
	}
	if (report.kind === 'limit') return `${label}, ${report.filter} > ${report.limitMag?.toFixed(2)}`;
	return label;
}
