import type { Role } from './vocabulary';

/**
 * Who may do what. The one table: every use case asks it by name, and so does every screen that
 * decides whether to show a button. Partners see only what was shared with them (circulars).
 */
export const PERMISSIONS = {
	viewBoard: ['duty', 'observer', 'pi', 'steward'],
	viewTransients: ['duty', 'observer', 'pi', 'steward'],
	viewRawPackets: ['duty', 'observer', 'pi', 'steward'],
	takeTransient: ['duty'],
	decideTransient: ['duty'],
	regroupAlerts: ['duty', 'steward'],
	/** By hand or from a file, what did not come over a stream's own way. */
	submitAlert: ['duty', 'steward'],

	viewSlots: ['duty', 'observer', 'pi', 'steward'],
	/** On the telescopes they work with. */
	claimSlot: ['observer'],
	/** Their own claim; stewards any. */
	releaseSlot: ['observer', 'steward'],
	reportSlot: ['observer'],
	/** Their own; stewards any. */
	withdrawReport: ['observer', 'steward'],

	viewCirculars: ['duty', 'observer', 'pi', 'steward', 'partner'],
	writeCircular: ['duty'],
	viewDeliveries: ['duty', 'pi', 'steward'],
	retryDelivery: ['steward'],
	/** On transients with a published circular, from a telescope of their own. */
	reportAsPartner: ['partner'],
	setPreferences: ['partner', 'duty', 'observer', 'pi', 'steward'],

	viewResponse: ['duty', 'observer', 'pi', 'steward'],
	viewNetwork: ['duty', 'observer', 'pi', 'steward'],
	editTelescopes: ['steward', 'pi'],
	/** Close the telescopes they work with; stewards any. */
	closeTelescope: ['observer', 'steward'],
	editStreams: ['steward'],
	editPeople: ['steward'],
	editRota: ['steward']
} as const satisfies Record<string, readonly Role[]>;

export type Permission = keyof typeof PERMISSIONS;

/** Whether somebody with these roles has the permission. */
export function allows(roles: readonly Role[], permission: Permission): boolean {
	const allowed: readonly Role[] = PERMISSIONS[permission];
	return roles.some((role) => allowed.includes(role));
}
