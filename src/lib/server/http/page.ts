import { error, fail, redirect, type ActionFailure, type RequestEvent } from '@sveltejs/kit';
import { DomainError, type FieldError } from '../domainError';
import { statusOf } from './problem';

/** Runs a page's load: refusals become the error page, or the way to sign in. */
export async function loadPage<T>(
	event: Pick<RequestEvent, 'url'>,
	body: () => Promise<T>
): Promise<T> {
	try {
		return await body();
	} catch (thrown) {
		if (!(thrown instanceof DomainError)) throw thrown;
		if (thrown.code === 'notSignedIn') {
			redirect(
				303,
				`/auth/sign-in?to=${encodeURIComponent(event.url.pathname + event.url.search)}`
			);
		}
		error(statusOf(thrown.code), thrown.message);
	}
}

/** What a refused form action hands back to its page. */
export type Refusal = { message: string; code: string; errors: FieldError[] };

/** Runs a form action: a refusal becomes `fail` with the sentence to show and the wrong fields. */
export async function runAction<T>(body: () => Promise<T>): Promise<T | ActionFailure<Refusal>> {
	try {
		return await body();
	} catch (thrown) {
		if (!(thrown instanceof DomainError)) throw thrown;
		return fail(statusOf(thrown.code), {
			message: thrown.message,
			code: thrown.code,
			errors: thrown.errors
		});
	}
}
