import { z } from 'zod';

/** The part of JSON Schema (2020-12) that zod writes for our schemas. */
export type JsonSchema = {
	type?: string;
	const?: unknown;
	enum?: unknown[];
	format?: string;
	pattern?: string;
	description?: string;
	default?: unknown;
	examples?: unknown[];
	properties?: Record<string, JsonSchema>;
	required?: string[];
	additionalProperties?: boolean | JsonSchema;
	items?: JsonSchema;
	oneOf?: JsonSchema[];
	anyOf?: JsonSchema[];
	minimum?: number;
	maximum?: number;
	exclusiveMinimum?: number;
	exclusiveMaximum?: number;
	minLength?: number;
	maxLength?: number;
	minItems?: number;
	maxItems?: number;
	'x-unit'?: string;
};

/** Suffixes of names and the units they stand for. */
const UNITS: [suffix: RegExp, unit: string][] = [
	[/Deg2$/, 'square degrees'],
	[/Deg$/, 'degrees'],
	[/Ms$/, 'milliseconds since 1970, UTC'],
	[/Minutes$/, 'minutes'],
	[/Mag$|^magnitude(Error)?$|^m1(Mean|Spread)$/, 'magnitudes'],
	[/PerYear$/, 'per year'],
	[/^(ra|dec|radius)$/, 'degrees'],
	[/Points$/, 'points'],
	[/^credible$/, 'percent'],
	[/^days$/, 'days'],
	[/[a-z0-9]M$/, 'metres'],
	[/[a-z0-9]S$/, 'seconds']
];

export function unitOf(name: string): string | undefined {
	return UNITS.find(([suffix]) => suffix.test(name))?.[1];
}

/**
 * A zod schema as JSON Schema for OpenAPI 3.1: what a sender may write (before defaults and transforms), without `$schema`,
 * with the unit of each number as `x-unit`. The pattern of a time repeats its format at length and is left out.
 */
export function jsonSchemaOf(schema: z.ZodType): JsonSchema {
	const { $schema: _, ...rest } = z.toJSONSchema(schema, {
		target: 'draft-2020-12',
		io: 'input',
		unrepresentable: 'any',
		override: ({ jsonSchema }) => {
			if (jsonSchema.format === 'date-time') delete jsonSchema.pattern;
			// Classes of Unicode are not read by every validator, and the words of the refusal say it better.
			if (jsonSchema.pattern?.includes('\\p{')) delete jsonSchema.pattern;
			// zod's own bounds of a JavaScript integer say nothing of ours.
			if (jsonSchema.maximum === Number.MAX_SAFE_INTEGER) delete jsonSchema.maximum;
			if (jsonSchema.minimum === Number.MIN_SAFE_INTEGER) delete jsonSchema.minimum;
		}
	});
	const made = rest as JsonSchema;
	addUnits(made);
	return made;
}

function addUnits(schema: JsonSchema): void {
	for (const [name, property] of Object.entries(schema.properties ?? {})) {
		const unit = unitOf(name);
		if (unit && mayBeNumber(property)) property['x-unit'] = unit;
	}
	for (const inner of innerSchemas(schema)) addUnits(inner);
}

function mayBeNumber(schema: JsonSchema): boolean {
	if (schema.type === 'number' || schema.type === 'integer') return true;
	return [schema.items, ...(schema.anyOf ?? [])].some((inner) => inner && mayBeNumber(inner));
}

export function innerSchemas(schema: JsonSchema): JsonSchema[] {
	const { properties, items, oneOf, anyOf, additionalProperties } = schema;
	return [
		...Object.values(properties ?? {}),
		...(items ? [items] : []),
		...(oneOf ?? []),
		...(anyOf ?? []),
		...(typeof additionalProperties === 'object' ? [additionalProperties] : [])
	];
}
