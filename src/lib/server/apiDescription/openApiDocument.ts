import { z } from 'zod';
import { problemSchema } from '../../domain/answers/otherAnswers';
import { PERMISSIONS } from '../../domain/permissions';
import { SESSION_COOKIE } from '../auth/session';
import { PROBLEMS } from '../http/problem';
import { jsonSchemaOf, type JsonSchema } from './jsonSchema';
import type { Answer, Body, Named, Operation } from './operation';
import { NOUNS } from './operation';
import { OPERATIONS } from './operations';
import { packetSchema } from './packetSchema';

export const API_ROOT = '/api/v1';

const PATH_PARAMETERS: Record<
	string,
	{ description: string; schema: JsonSchema; example: string }
> = {
	designation: {
		description: 'Designation of a transient',
		schema: { type: 'string', pattern: '^D\\d{2}[A-L]\\d{2}-[a-z]{1,4}$' },
		example: 'D26L01-b'
	},
	id: {
		description: 'Id from another answer',
		schema: { type: 'string', format: 'uuid' },
		example: '3f6c1e0a-5b7d-4c21-9a53-0d4f6f2b8e10'
	},
	number: {
		description: 'Number of a circular',
		schema: { type: 'integer', minimum: 1 },
		example: '12'
	}
};

const ABOUT = `Duskline takes alerts in and gives transients, outlooks, observations and circulars out.
Positions are ICRS in degrees, times ISO 8601 in UTC; a number's unit is in its name.
A stream sends with its own key; a person's program uses the session of somebody signed in, and may do what they may.
A request with a session that changes something must carry the header Origin with this installation's address.
Refusals are problem documents (RFC 9457).`;

/** The API's description, OpenAPI 3.1.1, made from the same schemas that check requests. */
export function openApiDocument(origin: string) {
	const schemas: Record<string, JsonSchema> = { Problem: jsonSchemaOf(problemSchema) };
	const refer = ({ name, schema }: Named) => {
		schemas[name] ??= name === 'AlertPacket' ? packetSchema().schema : jsonSchemaOf(schema);
		return { $ref: `#/components/schemas/${name}` };
	};
	const paths: Record<string, Record<string, object>> = {};
	for (const operation of OPERATIONS) {
		const path = (paths[API_ROOT + operation.path] ??= {});
		path[operation.method.toLowerCase()] = describedOperation(operation, refer);
	}
	return {
		openapi: '3.1.1',
		info: {
			title: 'Duskline',
			version: '1',
			description: ABOUT,
			license: { name: 'Apache License 2.0', identifier: 'Apache-2.0' }
		},
		servers: [{ url: origin }],
		tags: NOUNS.map((name) => ({ name })),
		paths,
		components: {
			schemas,
			securitySchemes: {
				streamKey: {
					type: 'http',
					scheme: 'bearer',
					description: 'Key of a stream, made under Network: Authorization: Bearer dsk_…'
				},
				session: {
					type: 'apiKey',
					in: 'cookie',
					name: SESSION_COOKIE,
					description: 'Cookie of somebody signed in'
				}
			}
		}
	};
}

type Refer = (named: Named) => { $ref: string };

function describedOperation(operation: Operation, refer: Refer) {
	const { guard, query, bodies, noun, summary } = operation;
	return {
		tags: [noun],
		operationId: operationId(operation),
		summary,
		description: whoMay(guard),
		security: guard === 'public' ? [] : [guard === 'key' ? { streamKey: [] } : { session: [] }],
		parameters: [...pathParameters(operation.path), ...(query ? queryParameters(query) : [])],
		...(bodies
			? {
					requestBody: {
						required: true,
						description: bodies
							.flatMap(({ mediaType, description }) =>
								description ? [`${mediaType}: ${description}`] : []
							)
							.join('\n'),
						content: Object.fromEntries(bodies.map((body) => [body.mediaType, media(body, refer)]))
					}
				}
			: {}),
		responses: responses(operation, refer)
	};
}

function operationId({ method, path }: Operation): string {
	const words = path.split(/[/.{}-]+/).filter(Boolean);
	return (
		method.toLowerCase() + words.map((word) => word[0]!.toUpperCase() + word.slice(1)).join('')
	);
}

function whoMay(guard: Operation['guard']): string {
	if (guard === 'public') return 'Anybody.';
	if (guard === 'key') return 'A stream with its key.';
	return `Signed in as ${PERMISSIONS[guard].join(', ')}.`;
}

function pathParameters(path: string) {
	return [...path.matchAll(/\{(\w+)\}/g)].map(([, name = '']) => ({
		name,
		in: 'path',
		required: true,
		...PATH_PARAMETERS[name]
	}));
}

function queryParameters(query: z.ZodObject) {
	const { properties = {}, required = [] } = jsonSchemaOf(query);
	return Object.entries(properties).map(([name, { description, ...schema }]) => ({
		name,
		in: 'query',
		required: required.includes(name),
		...(description ? { description } : {}),
		schema
	}));
}

function media({ content, examples }: Partial<Body>, refer: Refer) {
	return {
		schema: content ? refer(content) : { type: 'string' },
		...(examples
			? {
					examples: Object.fromEntries(
						Object.entries(examples).map(([name, value]) => [name, { value }])
					)
				}
			: {})
	};
}

/** Answers by status; two of one status share it, each with its media type. */
function responses({ answers, problems = [], guard }: Operation, refer: Refer) {
	const made: Record<string, { description: string; content?: Record<string, object> }> = {};
	const add = ({ status, says, mediaType, ...body }: Answer) => {
		const there = made[status];
		const content = mediaType
			? { ...there?.content, [mediaType]: media(body, refer) }
			: there?.content;
		made[status] = {
			description: there ? `${there.description}; ${says}` : says,
			...(content ? { content } : {})
		};
	};
	answers.forEach(add);
	const refusals =
		guard === 'public' || guard === 'key'
			? problems
			: (['notSignedIn', 'notAllowed', ...problems] as const);
	for (const code of new Set(refusals)) {
		const { status, title } = PROBLEMS[code];
		add({
			status,
			says: `${code}: ${title}`,
			mediaType: 'application/problem+json',
			content: { name: 'Problem', schema: problemSchema }
		});
	}
	return made;
}
