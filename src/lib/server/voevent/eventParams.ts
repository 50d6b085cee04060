import {
	MAPPED_PARAMS,
	type MappedParam,
	type ParamMap,
	type ParamSource
} from '../../domain/stream';
import { childOf, childrenOf, floatOf, type XmlElement } from './xmlElement';

export type EventNumbers = Partial<Record<MappedParam, number>>;

/** The largest that each may be, as in the schema of an alert; none may be negative. */
const MOST: Record<MappedParam, number> = {
	significance: 1e6,
	falseAlarmPerYear: 1e9,
	systematicDeg: 60
};

/**
 * The numbers that a stream's map finds in `What`. One that is missing, is no number or is out of its range
 * counts as absent: an alert is worth more than any of them.
 */
export function eventParams(
	root: XmlElement,
	map: ParamMap
): { numbers: EventNumbers; notes: string[] } {
	const holder = childOf(root, 'What');
	const numbers: EventNumbers = {};
	const notes: string[] = [];
	for (const key of Object.keys(MOST) as MappedParam[]) {
		const source = map[key];
		if (!source) continue;
		const text = valueOf(holder, source);
		const parsed = floatOf(text);
		if (parsed === null) {
			if (text !== undefined) notes.push(`${nameOf(source)} is no number and was left out`);
			continue;
		}
		// A factor of 1/60 or 31557600 must not leave seventeen digits for people to read.
		const value = source.factor === 1 ? parsed : Number((parsed * source.factor).toPrecision(6));
		const what = MAPPED_PARAMS[key].label.toLowerCase();
		if (value >= 0 && value <= MOST[key]) numbers[key] = value;
		else notes.push(`${nameOf(source)} gives ${value} as ${what} and was left out`);
	}
	return { numbers, notes };
}

/** The value of a Param or the first cell of a table's column; a table counts as a group of its name. */
function valueOf(what: XmlElement | undefined, { group, name }: ParamSource): string | undefined {
	if (group === '') return paramOf(what, name);
	for (const holder of what?.children ?? []) {
		if (holder.attributes.get('name') !== group) continue;
		if (holder.name !== 'Group' && holder.name !== 'Table') continue;
		const value = paramOf(holder, name) ?? firstCell(holder, name);
		if (value !== undefined) return value;
	}
	return undefined;
}

function paramOf(holder: XmlElement | undefined, name: string): string | undefined {
	const param = childrenOf(holder, 'Param').find((item) => item.attributes.get('name') === name);
	return param?.attributes.get('value') ?? childOf(param, 'Value')?.text;
}

function firstCell(table: XmlElement, name: string): string | undefined {
	const column = childrenOf(table, 'Field').findIndex(
		(field) => field.attributes.get('name') === name
	);
	if (column < 0) return undefined;
	return childrenOf(childOf(childOf(table, 'Data'), 'TR'), 'TD')[column]?.text;
}

function nameOf({ group, name }: ParamSource): string {
	return group === '' ? `Param ${name}` : `Param ${name} of ${group}`;
}
