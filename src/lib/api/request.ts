/** Who holds the time that somebody else wanted. */
export type HeldBy = { name: string; initials: string; startAt: string; endAt: string };

/** A refusal of the server (RFC 9457), or the lack of any answer. */
export class ApiProblem extends Error {
	override name = 'ApiProblem';
	constructor(
		/** 0 when no answer came. */
		readonly status: number,
		/** The refusal's code, as `slotTaken`; `noContact` when no answer came. */
		readonly code: string,
		readonly title: string,
		detail: string,
		readonly errors: { pointer: string; detail: string }[] = [],
		readonly heldBy: HeldBy | null = null
	) {
		super(detail);
	}
}

const TIMEOUT_MS = 10_000;

/** Sends a request; throws an ApiProblem for a refusal (except 304) and when no answer comes in 10 s. */
export async function request(
	path: string,
	init: RequestInit & { send?: typeof fetch } = {}
): Promise<Response> {
	const { send = fetch, signal, ...rest } = init;
	const limit = AbortSignal.timeout(TIMEOUT_MS);
	let response: Response;
	try {
		response = await send(path, {
			...rest,
			cache: 'no-store',
			signal: signal ? AbortSignal.any([signal, limit]) : limit
		});
	} catch (error) {
		if (signal?.aborted) throw error;
		throw new ApiProblem(0, 'noContact', 'No contact', 'The server did not answer. Try again.');
	}
	if (response.ok || response.status === 304) return response;
	throw await problemOf(response);
}

/** Posts JSON and returns the JSON answer. */
export async function postJson<T>(path: string, body: object): Promise<T> {
	const response = await request(path, {
		method: 'POST',
		headers: { 'content-type': 'application/json', accept: 'application/json' },
		body: JSON.stringify(body)
	});
	return (await response.json()) as T;
}

async function problemOf(response: Response): Promise<ApiProblem> {
	const body = (await response.json().catch(() => ({}))) as {
		type?: string;
		title?: string;
		detail?: string;
		errors?: { pointer: string; detail: string }[];
		heldBy?: HeldBy;
	};
	return new ApiProblem(
		response.status,
		body.type?.split(':').at(-1) ?? 'unknown',
		body.title ?? `The server answered ${response.status}`,
		body.detail ?? body.title ?? `The server answered ${response.status}.`,
		body.errors ?? [],
		body.heldBy ?? null
	);
}
