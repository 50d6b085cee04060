import type { ApiField, ApiFields } from '../../domain/apiPage';
import type { JsonSchema } from './jsonSchema';

/** A schema as lists of fields: nested objects by their path, each variant of a choice as a list of its own. */
export function fieldGroups(schema: JsonSchema): ApiFields[] {
	const own: ApiField[] = [];
	const variants: ApiFields[] = [];
	collect(schema, '', own, variants);
	const groups = own.length > 0 ? [{ caption: null, says: null, fields: own }] : [];
	return [...groups, ...variants];
}

function collect(
	schema: JsonSchema,
	path: string,
	fields: ApiField[],
	variants: ApiFields[]
): void {
	for (const [name, property] of Object.entries(schema.properties ?? {})) {
		const full = path === '' ? name : `${path}.${name}`;
		const needed = schema.required?.includes(name) ?? false;
		fields.push(fieldOf(full, property, needed));
		const inner = plain(property);
		const list = inner.items ? plain(inner.items) : null;
		if (list) collect(list, `${full}[]`, fields, variants);
		else collect(inner, full, fields, variants);
	}
	for (const variant of schema.oneOf ?? []) {
		const kind = Object.entries(variant.properties ?? {}).find(([, { const: value }]) => value);
		const own: ApiField[] = [];
		collect(variant, path, own, variants);
		const place = kind ? (path === '' ? kind[0] : `${path}.${kind[0]}`) : path;
		variants.push({
			caption: kind ? `${place}: ${String(kind[1].const)}` : place,
			says: variant.description ?? null,
			fields: own
		});
	}
}

export function fieldOf(name: string, schema: JsonSchema, needed: boolean): ApiField {
	return {
		name,
		type: typeWords(schema),
		unit: schema['x-unit'] ?? null,
		needed,
		says: schema.description ?? plain(schema).description ?? null
	};
}

/** The one alternative beside null. */
function plain(schema: JsonSchema): JsonSchema {
	const others = (schema.anyOf ?? []).filter(({ type }) => type !== 'null');
	return others.length === 1 && others[0] ? others[0] : schema;
}

function typeWords(schema: JsonSchema): string {
	if (schema.const !== undefined) return String(schema.const);
	if (schema.enum) return schema.enum.map(String).join(' | ');
	if (schema.anyOf) return schema.anyOf.map(typeWords).join(' or ');
	if (schema.oneOf) return 'one of several, see below';
	if (schema.format === 'date-time') return 'time';
	if (schema.format === 'uuid') return 'UUID';
	if (schema.format === 'uri') return 'address';
	switch (schema.type) {
		case 'array':
			return `list${schema.items ? ` of ${typeWords(schema.items)}` : ''}`;
		case 'integer':
			return `whole number${range(schema)}`;
		case 'number':
			return `number${range(schema)}`;
		case 'string':
			return schema.maxLength ? `text up to ${schema.maxLength}` : 'text';
		case 'boolean':
			return 'true or false';
		default:
			return schema.type ?? 'any';
	}
}

function range(schema: JsonSchema): string {
	const { minimum, maximum, exclusiveMinimum, exclusiveMaximum } = schema;
	const low = exclusiveMinimum === undefined ? minimum : exclusiveMinimum;
	const high = exclusiveMaximum === undefined ? maximum : exclusiveMaximum;
	const from =
		low === undefined ? '' : exclusiveMinimum === undefined ? `from ${low}` : `above ${low}`;
	const to =
		high === undefined ? '' : exclusiveMaximum === undefined ? `to ${high}` : `below ${high}`;
	return [from, to].some(Boolean) ? `, ${[from, to].filter(Boolean).join(' ')}` : '';
}
