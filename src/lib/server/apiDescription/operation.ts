import type { z } from 'zod';
import type { Permission } from '../../domain/permissions';
import type { DomainErrorCode } from '../domainError';

export const NOUNS = [
	'Alerts',
	'Board',
	'Transients',
	'Observations',
	'Slots',
	'Reports',
	'Circulars',
	'Response',
	'Push devices',
	'Description'
] as const;
export type Noun = (typeof NOUNS)[number];

/** A schema with the name it has in the document. */
export type Named = { name: string; schema: z.ZodType };

export type Body = {
	mediaType: string;
	/** Absent for what is not JSON. */
	content?: Named;
	description?: string;
	/** By name; each must be valid by the schema. */
	examples?: Record<string, unknown>;
};

export type Answer = Partial<Body> & { status: number; says: string };

/** One operation of the API, from which its description is made. */
export type Operation = {
	method: 'GET' | 'POST' | 'DELETE';
	/** Below /api/v1, parameters in braces. */
	path: string;
	noun: Noun;
	summary: string;
	/** Who may: a stream with its key, anybody, anybody signed in, or those with the permission. */
	guard: 'key' | 'public' | Permission;
	query?: z.ZodObject;
	bodies?: Body[];
	answers: Answer[];
	problems?: DomainErrorCode[];
};
