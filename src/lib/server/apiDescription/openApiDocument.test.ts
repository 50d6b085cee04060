import { Validator } from '@seriousme/openapi-schema-validator';
import { describe, expect, it } from 'vitest';
import { z } from 'zod';
import { openApiDocument } from './openApiDocument';
import { OPERATIONS } from './operations';
import { packetSchema } from './packetSchema';

/** As a reader gets it. */
const document = JSON.parse(
	JSON.stringify(openApiDocument('https://duskline.example'))
) as ReturnType<typeof openApiDocument>;

const examples = OPERATIONS.flatMap((operation) => {
	const name = `${operation.method} ${operation.path}`;
	return [...(operation.bodies ?? []), ...operation.answers].flatMap(({ content, examples }) =>
		content
			? Object.entries(examples ?? {}).map(([key, value]) => ({
					title: `${name}: ${content.name} ${key}`,
					content,
					value
				}))
			: []
	);
});

describe('the description of the API', () => {
	it('is valid OpenAPI 3.1', async () => {
		const validator = new Validator();
		const { valid, errors } = await validator.validate(structuredClone(document));
		expect(errors ?? []).toEqual([]);
		expect(valid).toBe(true);
		expect(validator.version).toBe('3.1');
	});

	it('would not be valid with a fault in it', async () => {
		const faulty = { ...structuredClone(document), paths: { '/x': { get: { responses: 5 } } } };
		expect((await new Validator().validate(faulty)).valid).toBe(false);
	});

	it('refers to schemas that are there, and has no leftovers of their making', () => {
		const text = JSON.stringify(document);
		const referred = [...text.matchAll(/"\$ref":"#\/components\/schemas\/(\w+)"/g)].map(
			([, name]) => name!
		);
		expect(referred.length).toBeGreaterThan(50);
		expect(Object.keys(document.components.schemas)).toEqual(expect.arrayContaining(referred));
		expect(text).not.toMatch(/"\$schema"|"\$id"|"\$defs"/);
	});

	it('gives each operation a name of its own', () => {
		const ids = Object.values(document.paths).flatMap((path) =>
			Object.values(path).map((operation) => (operation as { operationId: string }).operationId)
		);
		expect(new Set(ids).size).toBe(OPERATIONS.length);
	});

	it('says of every field of an alert packet what it means', () => {
		expect(packetSchema().missing).toEqual([]);
	});
});

describe('examples', () => {
	it.each(examples)('$title passes the schema that checks it', ({ content, value }) => {
		const parsed = content.schema.safeParse(value);
		expect(parsed.error?.issues ?? []).toEqual([]);
	});

	it.each(examples)('$title passes the schema that is shown', ({ content, value }) => {
		const shown = document.components.schemas[content.name]!;
		const parsed = z
			.fromJSONSchema(shown as Parameters<typeof z.fromJSONSchema>[0])
			.safeParse(value);
		expect(parsed.error?.issues ?? []).toEqual([]);
	});

	it('there is one for every body in JSON and for every shape', () => {
		const without = OPERATIONS.flatMap(({ path, bodies = [] }) =>
			bodies.some(({ mediaType, examples }) => mediaType === 'application/json' && !examples)
				? [path]
				: []
		);
		expect(without).toEqual([]);
		const shapes = document.components.schemas.AlertPacket!.properties!.shape!.oneOf!.map(
			(variant) => variant.properties!.kind!.const
		);
		const shown = examples.map(({ value }) => (value as { shape?: { kind: string } }).shape?.kind);
		expect(new Set(shown.filter(Boolean))).toEqual(new Set(shapes));
	});
});
