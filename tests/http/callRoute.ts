import type { Actor } from '../../src/lib/server/actor';
import type { App } from '../../src/lib/server/app';

type Call = {
	method?: string;
	path?: string;
	headers?: Record<string, string>;
	body?: BodyInit;
	params?: Record<string, string>;
	actor?: Actor | null;
};

/** A request event as a route's handler gets it, for calling the handler without a server. */
export function routeEvent(app: App, call: Call = {}) {
	const url = new URL(call.path ?? '/', app.config.origin);
	const cookies = new Map<string, string>();
	return {
		request: new Request(url, {
			method: call.method ?? 'GET',
			headers: call.headers,
			body: call.body
		}),
		url,
		params: call.params ?? {},
		route: { id: url.pathname },
		locals: { app, actor: call.actor ?? null, theme: 'paper', requestId: 'test' },
		cookies: {
			get: (name: string) => cookies.get(name),
			getAll: () => [],
			set: (name: string, value: string) => void cookies.set(name, value),
			delete: (name: string) => void cookies.delete(name),
			serialize: () => ''
		},
		fetch,
		getClientAddress: () => '127.0.0.1',
		isDataRequest: false,
		isSubRequest: false,
		isRemoteRequest: false,
		platform: undefined,
		setHeaders: () => {},
		depends: () => {},
		parent: () => Promise.resolve({}),
		untrack: <T>(body: () => T) => body()
	};
}
