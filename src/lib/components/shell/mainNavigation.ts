import type { Permission } from '$lib/domain/permissions';

/** The main navigation, in order; an entry shows for those who have the permission. */
export const MAIN_NAVIGATION = [
	{ href: '/now', label: 'Now', permission: 'viewBoard' },
	{ href: '/transients', label: 'Transients', permission: 'viewTransients' },
	{ href: '/slots', label: 'Slots', permission: 'viewSlots' },
	{ href: '/circulars', label: 'Circulars', permission: 'viewCirculars' },
	{ href: '/response', label: 'Response', permission: 'viewResponse' },
	{ href: '/network', label: 'Network', permission: 'viewNetwork' }
] as const satisfies readonly { href: string; label: string; permission: Permission }[];

/** Whether `path` is the page behind `href` or below it. */
export function isCurrent(href: string, path: string): boolean {
	return path === href || path.startsWith(`${href}/`);
}
