import { z } from 'zod';
import { ROLES, type Role } from './vocabulary';

const oneLine = /^[^\p{Cc}\u2028\u2029]*$/u;
const line = (most: number) =>
	z.string().trim().max(most, `At most ${most} characters.`).regex(oneLine, 'One line only.');

const PERSON_FIELDS = {
	name: line(80).min(1, 'A name is needed.'),
	/** Two or three letters; they stand on the night strip's brackets. */
	initials: z
		.string()
		.trim()
		.transform((initials) => initials.toUpperCase())
		.pipe(z.string().regex(/^\p{Lu}{2,3}$/u, 'Two or three letters.')),
	organisation: line(120).default(''),
	roles: z
		.array(z.enum(ROLES, 'There is no such role.'))
		.min(1, 'Choose at least one role.')
		.transform((roles) => ROLES.filter((role) => roles.includes(role)))
};

/** Somebody to invite. */
export const inviteSchema = z.object({
	email: z
		.string()
		.trim()
		.toLowerCase()
		.pipe(z.email('Must be an e-mail address.').max(200, 'At most 200 characters.')),
	...PERSON_FIELDS
});
export type Invite = z.output<typeof inviteSchema>;

/** A changed person; the e-mail address stays, as it is what they sign in with. */
export const personEditSchema = z.object(PERSON_FIELDS);
export type PersonEdit = z.output<typeof personEditSchema>;

export const PERSON_STATES = ['invited', 'joined', 'disabled'] as const;
export type PersonState = (typeof PERSON_STATES)[number];

export const PERSON_STATE_LABELS: Record<PersonState, string> = {
	invited: 'Invited, not signed in yet',
	joined: 'Joined',
	disabled: 'Disabled'
};

/** What the people page shows; instants are ISO 8601 UTC strings. */
export type PersonView = {
	id: string;
	name: string;
	initials: string;
	/** Null for those who may not edit people. */
	email: string | null;
	organisation: string;
	roles: Role[];
	state: PersonState;
	invitedAt: string;
	joinedAt: string | null;
	telescopeCodes: string[];
};
