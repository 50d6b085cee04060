import type { Theme } from '$lib/domain/vocabulary';

export const THEME_LABELS: Record<Theme, { label: string; hint: string }> = {
	paper: { label: 'Paper', hint: 'light' },
	night: { label: 'Night', hint: 'dark' },
	'dark-room': { label: 'Dark room', hint: 'red on black, keeps your eyes adapted' }
};

/** The browser's own bars: each theme's paper. */
export const THEME_COLOURS: Record<Theme, string> = {
	paper: '#f7f3ea',
	night: '#0f1022',
	'dark-room': '#000000'
};

const YEAR_S = 31_536_000;

/** Changes the theme at once and remembers it; the server reads the cookie, so that no page starts in white. */
export function chooseTheme(theme: Theme): void {
	document.documentElement.dataset.theme = theme;
	document.querySelector('meta[name="theme-color"]')?.setAttribute('content', THEME_COLOURS[theme]);
	const secure = location.protocol === 'https:' ? '; secure' : '';
	document.cookie = `duskline-theme=${theme}; path=/; max-age=${YEAR_S}; samesite=lax${secure}`;
}
