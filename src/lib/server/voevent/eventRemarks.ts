import { childOf, childrenOf, floatOf, type XmlElement } from './xmlElement';

const LONGEST = 4000;
const LONGEST_PART = 1000;

/** What Description, Why, How and Reference say, in a few plain lines for people. */
export function eventRemarks(root: XmlElement): string {
	const why = childOf(root, 'Why');
	const how = childOf(root, 'How');
	const lines = [
		line('', textsOf(root, 'Description')),
		line('Why', [...assessment(why), ...childrenOf(why, 'Inference').map(inference)]),
		line('How', textsOf(how, 'Description')),
		line('T0', timeError(root)),
		line('See', [...references(root), ...references(why), ...references(how)])
	];
	return cut(lines.filter((item) => item !== '').join('\n'), LONGEST);
}

function line(label: string, parts: string[]): string {
	const text = parts.filter((part) => part !== '').join('; ');
	return text === '' || label === '' ? text : `${label}: ${text}`;
}

function assessment(why: XmlElement | undefined): string[] {
	const importance = floatOf(why?.attributes.get('importance'));
	return [
		...textsOf(why, 'Name'),
		...textsOf(why, 'Concept'),
		...textsOf(why, 'Description'),
		importance === null ? '' : `importance ${importance}`
	];
}

function inference(element: XmlElement): string {
	const what = [
		...textsOf(element, 'Name'),
		...textsOf(element, 'Concept'),
		...textsOf(element, 'Description')
	].join(', ');
	const probability = floatOf(element.attributes.get('probability'));
	const relation = oneLine(element.attributes.get('relation') ?? '');
	const details = [
		relation,
		probability === null || probability < 0 || probability > 1 ? '' : `probability ${probability}`
	].filter((item) => item !== '');
	return details.length > 0 ? `${what} (${details.join(', ')})`.trim() : what;
}

function timeError(root: XmlElement): string[] {
	const time = [
		'WhereWhen',
		'ObsDataLocation',
		'ObservationLocation',
		'AstroCoords',
		'Time'
	].reduce<XmlElement | undefined>((at, name) => childOf(at, name), root);
	const error = floatOf(childOf(time, 'Error')?.text);
	const unit = time?.attributes.get('unit') ?? 's';
	return error !== null && error > 0 && unit === 's' ? [`known to ${error} s`] : [];
}

function references(parent: XmlElement | undefined): string[] {
	return childrenOf(parent, 'Reference').map((item) => oneLine(item.attributes.get('uri') ?? ''));
}

function textsOf(parent: XmlElement | undefined, name: string): string[] {
	return childrenOf(parent, name).map((element) => oneLine(element.text));
}

function oneLine(text: string): string {
	return cut(text.replace(/\s+/g, ' ').trim(), LONGEST_PART);
}

/** Cut between characters, never inside a pair of surrogates. */
function cut(text: string, most: number): string {
	if (text.length <= most) return text;
	const kept = text.slice(0, most - 1);
	return `${/[\ud800-\udbff]$/.test(kept) ? kept.slice(0, -1) : kept}…`;
}
