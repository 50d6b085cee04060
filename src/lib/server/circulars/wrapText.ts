/**
 * Breaks a paragraph into lines of at most `columns` characters at spaces; a longer word is cut.
 * Lines after the first start with `indent`.
 */
export function wrapText(paragraph: string, columns: number, indent = ''): string[] {
	const lines: string[] = [];
	let line = '';
	let started = false;
	const push = () => {
		lines.push(line);
		line = indent;
		started = false;
	};
	for (const word of paragraph.split(/\s+/).filter(Boolean)) {
		let rest = [...word];
		while (rest.length > 0) {
			const used = [...line].length + (started ? 1 : 0);
			const room = columns - used;
			if (rest.length <= room) {
				line += (started ? ' ' : '') + rest.join('');
				started = true;
				rest = [];
			} else if (started) {
				push();
			} else {
				line += rest.slice(0, room).join('');
				rest = rest.slice(room);
				push();
			}
		}
	}
	if (started) lines.push(line);
	return lines;
}
