/** How a number on the board comes about; all texts are ready to be shown, numbers with their units. */
export type Explanation = {
	title: string;
	/** The number as the board shows it. */
	value: string;
	steps: { label: string; text: string }[];
	assumptions: string[];
	/** Author and year of each published method. */
	sources: string[];
};

export const SOURCES = {
	fisher: 'Density of a circle: Fisher 1953, Proc. R. Soc. Lond. A 217, 295',
	agreement: 'Odds of one source: Budavári & Szalay 2008, ApJ 679, 301',
	airmass: 'Airmass: Kasten & Young 1989, Applied Optics 28, 4735',
	moonlight: 'Moonlight: Krisciunas & Schaefer 1991, PASP 103, 1033',
	coverage: 'Greedy coverage: Nemhauser, Wolsey & Fisher 1978, Math. Programming 14, 265',
	search: 'Looking and not finding: Koopman 1946; Stone 1975, Theory of Optimal Search',
	fade: 'Default fade: Akerlof & Swan 2007, ApJ 671, 1868; a later sample is fainter: Wang et al. 2013, arXiv:1307.5939'
} as const;

/** Hours and minutes of an instant in UTC: `06:12 UTC`. */
export function utcMinute(at: string): string {
	return `${new Date(at).toISOString().slice(11, 16)} UTC`;
}

/** `one telescope`, `3 telescopes`. */
export function counted(count: number, one: string, many = `${one}s`): string {
	return count === 1 ? `one ${one}` : `${count} ${many}`;
}
