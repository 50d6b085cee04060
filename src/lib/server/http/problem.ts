import { json } from '@sveltejs/kit';
import type { z } from 'zod';
import { plainIssue } from '../../domain/plainIssue';
import { DomainError, type DomainErrorCode, type FieldError } from '../domainError';

/** The one table of codes and HTTP statuses. */
export const PROBLEMS: Record<DomainErrorCode, { status: number; title: string }> = {
	notSignedIn: { status: 401, title: 'Not signed in' },
	notAllowed: { status: 403, title: 'Not allowed' },
	notFound: { status: 404, title: 'Not found' },
	invalid: { status: 422, title: 'Some fields are not valid' },
	tooLate: { status: 409, title: 'Too late' },
	alreadyTaken: { status: 409, title: 'Already taken' },
	slotTaken: { status: 409, title: 'That time is claimed already' },
	wrongState: { status: 409, title: 'Not possible in this state' },
	packetConflict: { status: 409, title: 'Another packet has this id and serial' },
	nameTaken: { status: 409, title: 'That name is in use' },
	unsafePointing: { status: 422, title: 'Outside the telescope’s limits' },
	unsupportedMediaType: { status: 415, title: 'Unsupported media type' },
	bodyTooLarge: { status: 413, title: 'Body too large' },
	malformedBody: { status: 400, title: 'The body can’t be read' },
	tooManyRequests: { status: 429, title: 'Too many requests' },
	originRefused: { status: 403, title: 'Request from another origin' },
	unavailable: { status: 503, title: 'Not available just now' }
};

export function statusOf(code: DomainErrorCode): number {
	return PROBLEMS[code].status;
}

/** Answers a refusal as `application/problem+json` (RFC 9457) with an `errors` list for fields. */
export function problemResponse(error: DomainError): Response {
	const { status, title } = PROBLEMS[error.code];
	return json(
		{
			type: `urn:duskline:problem:${error.code}`,
			title,
			status,
			detail: error.message,
			...(error.errors.length > 0 ? { errors: error.errors } : {}),
			...error.extra
		},
		{
			status,
			headers: {
				'content-type': 'application/problem+json',
				...(typeof error.extra.retryAfterS === 'number'
					? { 'retry-after': String(error.extra.retryAfterS) }
					: {})
			}
		}
	);
}

/** zod's issues as field errors with JSON Pointers (RFC 6901). */
export function fieldErrorsOf(error: z.ZodError): FieldError[] {
	return error.issues.flatMap((issue) => {
		const base = issue.path.map(pointerPart).join('');
		if (issue.code === 'unrecognized_keys') {
			return issue.keys.map((key) => ({
				pointer: `${base}${pointerPart(key)}`,
				detail: 'is not a known field'
			}));
		}
		return [{ pointer: base, detail: issue.message }];
	});
}

function pointerPart(part: PropertyKey): string {
	return `/${String(part).replaceAll('~', '~0').replaceAll('/', '~1')}`;
}

/** Parses with a schema, or throws `invalid` naming each field. */
export function parseInput<Schema extends z.ZodType>(
	schema: Schema,
	input: unknown
): z.output<Schema> {
	const parsed = schema.safeParse(input, { error: plainIssue });
	if (parsed.success) return parsed.data;
	throw new DomainError('invalid', 'Some fields are not valid.', fieldErrorsOf(parsed.error));
}
