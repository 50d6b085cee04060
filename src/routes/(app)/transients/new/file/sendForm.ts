import { deserialize } from '$app/forms';
import type { ActionResult } from '@sveltejs/kit';

/**
 * Sends a form with files to its page's action and tells how much of it is on the way, 0 to 1; `fetch` can't.
 * Rejects where no answer came.
 */
export function sendForm(
	form: HTMLFormElement,
	onSent: (share: number) => void
): Promise<ActionResult> {
	return new Promise((resolve, reject) => {
		const request = new XMLHttpRequest();
		request.open('POST', form.action);
		request.setRequestHeader('accept', 'application/json');
		request.setRequestHeader('x-sveltekit-action', 'true');
		request.upload.addEventListener('progress', ({ loaded, total }) =>
			onSent(total > 0 ? loaded / total : 0)
		);
		request.upload.addEventListener('load', () => onSent(1));
		request.addEventListener('error', () => reject(new Error('no answer')));
		request.addEventListener('load', () => {
			try {
				resolve(deserialize(request.responseText));
			} catch {
				// A refusal that came before the action: too large, or signed out.
				reject(new Error(`answer ${request.status}`));
			}
		});
		request.send(new FormData(form));
	});
}
