import type { Permission } from '../../src/lib/domain/permissions';

/** `public`: anybody; `key`: a stream's API key; else the permission that its use case asks for. */
export type Guard = Permission | 'public' | 'key' | 'signedIn';

/**
 * What guards each load, action and handler, as `file › entry`. A new one that is not listed here
 * fails the test: decide who may, then write it down.
 */
export const ROUTE_GUARDS: Record<string, Guard> = {
	'/+layout.server.ts › load': 'public',
	'/+page.server.ts › load': 'public',
	'/healthz/+server.ts › GET': 'public',
	'/auth/confirm/+page.server.ts › load': 'public',
	'/auth/demo/+page.server.ts › load': 'public',
	'/auth/demo/+page.server.ts › action default': 'public',
	'/auth/sent/+page.server.ts › load': 'public',
	'/auth/sign-in/+page.server.ts › load': 'public',
	'/auth/sign-in/+page.server.ts › action default': 'public',
	'/auth/sign-out/+page.server.ts › load': 'public',
	'/auth/sign-out/+page.server.ts › action default': 'public',

	'/api/v1/alerts/+server.ts › POST': 'key',
	'/api/v1/board/+server.ts › GET': 'viewBoard',
	'/api/v1/slots/+server.ts › GET': 'viewSlots',
	'/api/v1/slots/+server.ts › POST': 'claimSlot',
	'/api/v1/slots/[id=uuid]/on-sky/+server.ts › POST': 'claimSlot',
	'/api/v1/slots/[id=uuid]/release/+server.ts › POST': 'releaseSlot',
	'/api/v1/slots/[id=uuid]/report/+server.ts › POST': 'reportSlot',
	'/api/v1/transients/[designation=designation]/decision/+server.ts › POST': 'decideTransient',
	'/api/v1/transients/[designation=designation]/take/+server.ts › POST': 'takeTransient'
};
