import { CIRCULAR_COLUMNS } from '../../domain/circular';
import { sexagesimal } from '../../sky/sexagesimal';
import type { CircularRecord, RecordedReport } from './circularRecord';
import {
	angleInWords,
	areaInWords,
	elapsedInWords,
	oddsInWords,
	shapeInWords,
	utcMinute,
	utcSecond
} from './plainWords';
import { wrapText } from './wrapText';

/** The draft of a circular from what the record holds: plain text, lines of at most 72 columns. */
export function circularText(record: CircularRecord): { title: string; body: string } {
	return { title: title(record), body: body(record) };
}

function title(record: CircularRecord): string {
	const { designation, reports, region, t0 } = record;
	if (record.retracted) return `${designation}: retracted, please stop observing`;
	const detection = reports.find((report) => report.kind === 'detection');
	if (detection) {
		const after = elapsedInWords(t0.getTime(), detection.observedAt.getTime());
		return `${designation}: ${magnitude(detection)}, ${after} after T0`;
	}
	const deepest = reports
		.filter((report) => report.kind === 'limit')
		.sort((a, b) => (b.limitMag ?? 0) - (a.limitMag ?? 0))[0];
	if (deepest) return `${designation}: nothing found down to ${magnitude(deepest)}`;
	if (region) return `${designation}: position within ${angleInWords(region.equivalentRadiusDeg)}`;
	return `${designation}: first report`;
}

function body(record: CircularRecord): string {
	const sections = [
		summary(record),
		alerts(record),
		position(record),
		observed(record),
		next(record),
		contact(record)
	];
	return sections
		.filter((lines) => lines.length > 0)
		.map((lines) => lines.join('\n'))
		.join('\n\n');
}

function summary({ designation, t0, now, retracted }: CircularRecord): string[] {
	return [
		...field('Transient', designation),
		...field('T0', utcSecond(t0)),
		...field(
			'Written',
			`${utcMinute(now)}, ${elapsedInWords(t0.getTime(), now.getTime())} after T0`
		),
		...(retracted
			? [
					'',
					...paragraph(
						'Every alert of this transient has been withdrawn. No more observations are needed.'
					)
				]
			: [])
	];
}

function alerts({ alerts }: CircularRecord): string[] {
	if (alerts.length === 0) return [];
	return [
		'Alerts',
		...alerts.flatMap((alert) =>
			item(
				`${alert.streamName} ${alert.packetId}, received ${utcSecond(alert.receivedAt)}: ` +
					[
						alert.shape ? shapeInWords(alert.shape) : 'no position',
						alert.significance === null ? null : `significance ${alert.significance}`,
						alert.live ? null : 'withdrawn or replaced since'
					]
						.filter(Boolean)
						.join(', ')
			)
		)
	];
}

function position({ region, retracted }: CircularRecord): string[] {
	if (!region || retracted) return [];
	const digits = region.equivalentRadiusDeg < 1 / 60 ? 1 : 0;
	const { ra, dec } = sexagesimal(region.centre, digits);
	return [
		`Position (ICRS), from ${region.alertCount} ${region.alertCount === 1 ? 'alert' : 'alerts'}`,
		...field('RA', `${ra}   (${region.centre.raDeg.toFixed(5)} deg)`),
		...field('Dec', `${dec}   (${region.centre.decDeg.toFixed(5)} deg)`),
		...field(
			'Within',
			`${angleInWords(region.equivalentRadiusDeg)} (90 %, ${areaInWords(region.area90Deg2)}; 50 %, ${areaInWords(region.area50Deg2)})`
		),
		...(region.logOddsAgreement === null
			? []
			: field(
					'Agreement',
					`${oddsInWords(region.logOddsAgreement)} that the alerts have one source`
				))
	];
}

function observed({ reports, t0 }: CircularRecord): string[] {
	if (reports.length === 0) return ['Observed', ...item('Nothing has been reported yet.')];
	return [
		'Observed',
		...reports.flatMap((report) =>
			item(
				[
					`${utcMinute(report.observedAt)} (${elapsedInWords(t0.getTime(), report.observedAt.getTime())} after T0, mid-exposure)`,
					report.observerText,
					magnitude(report) + (report.exposureS === null ? '' : ` in ${report.exposureS} s`)
				].join(', ') +
					(report.position
						? `, at RA ${sexagesimal(report.position, 1).ra} Dec ${sexagesimal(report.position, 1).dec}`
						: '')
			)
		)
	];
}

function next({ next, retracted }: CircularRecord): string[] {
	if (retracted) return [];
	if (next.length === 0) return ['Observing next', ...item('Nobody has claimed a slot.')];
	return [
		'Observing next',
		...next.flatMap((slot) =>
			item(
				`${slot.telescopeText}, ${utcMinute(slot.startAt)} to ${utcMinute(slot.endAt)}, filter ${slot.filter}`
			)
		)
	];
}

function contact({ author }: CircularRecord): string[] {
	const who = author.organisation ? `${author.name}, ${author.organisation}` : author.name;
	return ['Contact', ...item(`${who}, ${author.email}`)];
}

function magnitude(report: RecordedReport): string {
	const filter = report.filter ?? 'unfiltered';
	if (report.kind === 'limit') return `${filter} > ${report.limitMag?.toFixed(1)} (5 sigma)`;
	const error = report.magnitudeError === null ? '' : ` +/- ${report.magnitudeError.toFixed(2)}`;
	return `${filter} = ${report.magnitude?.toFixed(2)}${error}`;
}

const paragraph = (text: string) => wrapText(text, CIRCULAR_COLUMNS);

/** A list item; later lines are set under its text. */
function item(text: string): string[] {
	return wrapText(`- ${text}`, CIRCULAR_COLUMNS, '  ');
}

const LABEL_COLUMNS = 11;

function field(label: string, value: string): string[] {
	const [first = '', ...rest] = wrapText(value, CIRCULAR_COLUMNS - LABEL_COLUMNS);
	return [
		label.padEnd(LABEL_COLUMNS) + first,
		...rest.map((line) => ' '.repeat(LABEL_COLUMNS) + line)
	];
}
