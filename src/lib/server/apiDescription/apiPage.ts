import type { ApiBody, ApiOperation, ApiPage } from '../../domain/apiPage';
import { PROBLEMS } from '../http/problem';
import { fieldGroups, fieldOf } from './fieldWords';
import type { JsonSchema } from './jsonSchema';
import { openApiDocument } from './openApiDocument';

type Media = {
	schema: JsonSchema & { $ref?: string };
	examples?: Record<string, { value: unknown }>;
};
type Described = {
	operationId: string;
	tags: string[];
	summary: string;
	description: string;
	parameters: { name: string; required: boolean; description?: string; schema: JsonSchema }[];
	requestBody?: { description: string; content: Record<string, Media> };
	responses: Record<string, { description: string; content?: Record<string, Media> }>;
};

/** The page's content, made from the document itself, so that both say the same. */
export function apiPage(origin: string): ApiPage {
	const document = openApiDocument(origin);
	const operations = Object.entries(document.paths).flatMap(([path, methods]) =>
		Object.entries(methods).map(([method, described]) => ({
			noun: (described as Described).tags[0],
			operation: operationView(path, method, described as Described, document.components.schemas)
		}))
	);
	return {
		nouns: document.tags.map(({ name }) => ({
			name,
			id: name.toLowerCase().replaceAll(' ', '-'),
			operations: operations.flatMap((item) => (item.noun === name ? [item.operation] : []))
		})),
		problems: Object.entries(PROBLEMS).map(([code, { status, title }]) => ({ code, status, title }))
	};
}

function operationView(
	path: string,
	method: string,
	described: Described,
	schemas: Record<string, JsonSchema>
): ApiOperation {
	const { operationId, summary, description, parameters, requestBody, responses } = described;
	const says = new Map(
		(requestBody?.description ?? '').split('\n').map((line): [string, string] => {
			const [mediaType = '', ...words] = line.split(': ');
			return [mediaType, words.join(': ')];
		})
	);
	const body = ([mediaType, media]: [string, Media]) =>
		bodyView(mediaType, media, schemas, says.get(mediaType) ?? null);
	return {
		id: operationId,
		method: method.toUpperCase(),
		path,
		summary,
		who: description,
		parameters: parameters.map((item) =>
			fieldOf(item.name, { ...item.schema, description: item.description }, item.required)
		),
		bodies: Object.entries(requestBody?.content ?? {}).map(body),
		answers: Object.entries(responses).map(([status, answer]) => ({
			status,
			says: answer.description,
			// A problem document is explained once, for all.
			bodies: Object.entries(answer.content ?? {})
				.filter(([mediaType]) => mediaType !== 'application/problem+json')
				.map(([mediaType, media]) => bodyView(mediaType, media, schemas, null))
		}))
	};
}

function bodyView(
	mediaType: string,
	{ schema, examples = {} }: Media,
	schemas: Record<string, JsonSchema>,
	says: string | null
): ApiBody {
	const name = schema.$ref?.split('/').at(-1);
	const shown = name ? schemas[name] : undefined;
	return {
		mediaType,
		says,
		groups: shown ? fieldGroups(shown) : [],
		examples: Object.entries(examples).map(([key, { value }]) => ({
			name: key,
			text: typeof value === 'string' ? value : JSON.stringify(value, null, 2)
		}))
	};
}
