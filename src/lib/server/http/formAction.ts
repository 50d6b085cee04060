import { fail, type ActionFailure, type RequestEvent } from '@sveltejs/kit';
import type { Permission } from '../../domain/permissions';
import { requirePermission } from '../actor';
import { formObject, type FormObject } from './formObject';
import { runAction, type Refusal } from './page';

/** A refusal with what was entered, so that a page without JavaScript can show it again. */
export type FormRefusal = Refusal & { values: FormObject };

/**
 * Runs a form action whose fields are named by pointers (see `formObject`). Who may not is refused
 * before anything they sent is looked at.
 */
export async function formAction<T>(
	event: Pick<RequestEvent, 'locals' | 'request'>,
	permission: Permission,
	body: (input: FormObject) => Promise<T>
): Promise<T | ActionFailure<FormRefusal>> {
	let values: FormObject = {};
	const outcome = await runAction(async () => {
		requirePermission(event.locals.actor, permission);
		values = formObject(await event.request.formData());
		return { done: await body(values) };
	});
	return 'done' in outcome ? outcome.done : fail(outcome.status, { ...outcome.data, values });
}
