import { allows, type Permission } from '../domain/permissions';
import type { Role } from '../domain/vocabulary';
import { DomainError } from './domainError';

/** The person on whose behalf a use case runs. */
export type Actor = {
	id: string;
	name: string;
	initials: string;
	email: string;
	roles: Role[];
};

/** Throws unless somebody is signed in and has the permission. */
export function requirePermission(
	actor: Actor | null | undefined,
	permission: Permission
): asserts actor is Actor {
	if (!actor) throw new DomainError('notSignedIn', 'Sign in first.');
	if (!allows(actor.roles, permission)) {
		throw new DomainError('notAllowed', 'Your role does not allow this.', [], { permission });
	}
}
