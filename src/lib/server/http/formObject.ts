/** A form's fields as nested plain objects and lists. */
export type FormObject = { [name: string]: FormValue };
type FormValue = string | FormObject | FormValue[];

const UNSAFE = new Set(['__proto__', 'constructor', 'prototype']);
const MOST_ITEMS = 500;

/**
 * Nests a form whose field names are JSON Pointers (RFC 6901) without their first slash: `limits/minAltDeg`,
 * `depths/0/filter`, and `roles/-` for the next item of a list. Files are left out. List items in which
 * everything typed is empty are dropped from the end, so that a form can offer a blank row.
 */
export function formObject(form: FormData): FormObject {
	const root: FormObject = {};
	for (const [name, value] of form) {
		if (typeof value !== 'string') continue;
		const path = name.split('/');
		if (path.some((part) => UNSAFE.has(part))) continue;
		setAt(root, path, value);
	}
	return dropBlanks(root) as FormObject;
}

function setAt(root: FormObject, path: string[], value: string): void {
	let at: FormObject | FormValue[] = root;
	for (const [depth, part] of path.entries()) {
		const key: string | number | null = Array.isArray(at) ? indexOf(part, at) : part;
		if (key === null) return;
		const slots = at as Record<string | number, FormValue>;
		if (depth === path.length - 1) {
			slots[key] = value;
			return;
		}
		const known: FormValue | undefined = slots[key];
		if (typeof known === 'string') return;
		const next: FormObject | FormValue[] = known ?? (/^(\d+|-)$/.test(path[depth + 1]!) ? [] : {});
		slots[key] = next;
		at = next;
	}
}

function indexOf(part: string, list: FormValue[]): number | null {
	const index = part === '-' ? list.length : /^\d{1,3}$/.test(part) ? Number(part) : null;
	return index !== null && index < MOST_ITEMS ? index : null;
}

function dropBlanks(value: FormValue): FormValue {
	if (typeof value === 'string') return value;
	if (!Array.isArray(value)) {
		return Object.fromEntries(
			Object.entries(value).map(([name, item]) => [name, dropBlanks(item)])
		);
	}
	// Holes come from rows that a browser took out of the middle.
	const items = Array.from(value, (item) => dropBlanks(item ?? {}));
	while (items.length > 0 && isBlank(items.at(-1)!)) items.pop();
	return items;
}

/** A kind chosen in a select is there even in an untouched row. */
const CHOSEN = 'shape';

function isBlank(value: FormValue): boolean {
	if (typeof value === 'string') return value.trim() === '';
	if (Array.isArray(value)) return value.every(isBlank);
	return Object.entries(value).every(([name, item]) => name === CHOSEN || isBlank(item));
}
