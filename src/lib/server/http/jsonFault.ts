const TOKEN =
	// eslint-disable-next-line no-control-regex
	/[ \t\n\r]*(?:"[^"\\\u0000-\u001f]*(?:\\(?:["\\/bfnrt]|u[0-9a-fA-F]{4})[^"\\\u0000-\u001f]*)*"|-?(?:0|[1-9]\d*)(?:\.\d+)?(?:[eE][+-]?\d+)?|true|false|null|[{}[\],:])/y;

type Expected = 'value' | 'firstItem' | 'firstName' | 'name' | 'colon' | 'next' | 'end';

/** Index of the character at which a text stops being JSON (RFC 8259); its length when it is cut off; null when it is JSON. */
export function jsonFaultIndex(text: string): number | null {
	const open: ('[' | '{')[] = [];
	let expected: Expected = 'value';
	TOKEN.lastIndex = 0;
	for (;;) {
		const from = TOKEN.lastIndex;
		const token = TOKEN.exec(text)?.[0].trim();
		if (token === undefined) return ending(text, from, expected);
		const at = TOKEN.lastIndex - token.length;
		const after = following(token, expected, open);
		if (after === null) return at;
		expected = after;
	}
}

/** Where the next token should be and is none: fine at the end of a whole value. */
function ending(text: string, from: number, expected: Expected): number | null {
	const rest = text.slice(from).search(/[^ \t\n\r]/);
	if (rest < 0) return expected === 'end' ? null : text.length;
	return from + rest;
}

function following(token: string, expected: Expected, open: ('[' | '{')[]): Expected | null {
	const inside = () => (open.length === 0 ? 'end' : 'next');
	if (token === ']' || token === '}') {
		const fits =
			open.at(-1) === (token === ']' ? '[' : '{') &&
			(expected === 'next' || expected === (token === ']' ? 'firstItem' : 'firstName'));
		if (!fits) return null;
		open.pop();
		return inside();
	}
	if (token === ':') return expected === 'colon' ? 'value' : null;
	if (token === ',') {
		if (expected !== 'next') return null;
		return open.at(-1) === '[' ? 'value' : 'name';
	}
	if (expected === 'firstName' || expected === 'name') return token[0] === '"' ? 'colon' : null;
	if (expected !== 'value' && expected !== 'firstItem') return null;
	if (token === '[' || token === '{') {
		open.push(token);
		return token === '[' ? 'firstItem' : 'firstName';
	}
	return inside();
}
