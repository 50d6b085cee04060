const TITLES: Record<string, string> = {
	malformedBody: 'It can’t be taken apart',
	invalid: 'Some of its fields are not valid',
	unsupportedMediaType: 'A format that is not read here',
	bodyTooLarge: 'It is too large',
	packetConflict: 'Its name is taken by another packet'
};

/** Why a packet waits, in plain words, by the code that its sender was told. */
export function reasonTitle(code: string): string {
	return TITLES[code] ?? 'It could not be taken in';
}

/** A size for people: `412 bytes`, `1.4 KiB`. */
export function formatBytes(bytes: number): string {
	if (bytes < 1024) return bytes === 1 ? '1 byte' : `${bytes} bytes`;
	const kib = bytes / 1024;
	return kib < 1024
		? `${Number(kib.toPrecision(3))} KiB`
		: `${Number((kib / 1024).toPrecision(3))} MiB`;
}

/** Control characters besides tab and line ends, and those that shape text without being seen. */
const INVISIBLE = /(?![\t\n\r])[\p{Cc}\p{Cf}\p{Zl}\p{Zp}]/gu;

/** A text with its invisible characters written out, so that it shows what it holds: `\u202e`. */
export function visibleText(text: string): string {
	return text.replaceAll(
		INVISIBLE,
		(character) => `\\u${character.codePointAt(0)!.toString(16).padStart(4, '0')}`
	);
}
