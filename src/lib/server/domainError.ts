/** Every way in which a use case can refuse, as a literal code. `http/problem.ts` maps them to statuses. */
export type DomainErrorCode =
	| 'notSignedIn'
	| 'notAllowed'
	| 'notFound'
	| 'invalid'
	| 'tooLate'
	| 'alreadyTaken'
	| 'slotTaken'
	| 'wrongState'
	| 'packetConflict'
	| 'nameTaken'
	| 'unsafePointing'
	| 'unsupportedMediaType'
	| 'bodyTooLarge'
	| 'malformedBody'
	| 'tooManyRequests'
	| 'originRefused'
	| 'unavailable';

/** One field that is wrong: a JSON Pointer (RFC 6901) or form field name, and what is wrong with it. */
export type FieldError = { pointer: string; detail: string };

/** A use case's refusal; `message` is a sentence for the person, `extra` goes into the problem document. */
export class DomainError extends Error {
	override name = 'DomainError';
	constructor(
		readonly code: DomainErrorCode,
		message: string,
		readonly errors: FieldError[] = [],
		readonly extra: Record<string, unknown> = {}
	) {
		super(message);
	}
}
