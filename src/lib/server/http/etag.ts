/** If-None-Match as RFC 9110 section 13.1.2 has it: a list of tags, weak ones included, or `*`. */
export function matchesEtag(header: string | null, tag: string): boolean {
	if (!header) return false;
	return header
		.split(',')
		.map((item) => item.trim().replace(/^W\//, ''))
		.some((item) => item === '*' || item === tag);
}
