import AxeBuilder from '@axe-core/playwright';
import { expect, test, type Page } from '@playwright/test';
import { THEMES, type Theme } from '../../src/lib/domain/vocabulary';
import type { Board } from '../../src/lib/domain/board';
import { signInAs } from './support/signIn';

type Look = { theme: Theme; width: number };

/** The pages named in the main job: every theme at every width. */
const EVERY_LOOK: Look[] = THEMES.flatMap((theme) =>
	[360, 768, 1440].map((width) => ({ theme, width }))
);
/** Pages that are made of the same parts: the narrowest, and the theme with the least contrast. */
const TWO_LOOKS: Look[] = [
	{ theme: 'paper', width: 360 },
	{ theme: 'dark-room', width: 1440 }
];
/** WCAG 2.2 AA and what axe counts as good practice. */
const TAGS = ['wcag2a', 'wcag2aa', 'wcag21a', 'wcag21aa', 'wcag22aa', 'best-practice'];

async function expectAccessible(page: Page, path: string, looks: Look[]): Promise<void> {
	for (const { theme, width } of looks) {
		const look = `${path} in ${theme} at ${width} px`;
		await page
			.context()
			.addCookies([{ name: 'duskline-theme', value: theme, url: new URL(page.url()).origin }]);
		await page.setViewportSize({ width, height: width < 500 ? 740 : 900 });
		const answer = await page.goto(path);
		expect(answer?.status(), look).toBe(200);
		await expect(page.locator('html')).toHaveAttribute('data-theme', theme);
		await expect(page.locator('h1').first()).toBeAttached();
		const { violations } = await new AxeBuilder({ page }).withTags(TAGS).analyze();
		const found = violations.map(
			({ id, nodes }) => `${id}: ${nodes.map((node) => node.target.join(' ')).join(' | ')}`
		);
		expect(found, look).toEqual([]);
		const overflowPx = await page.evaluate(
			() => document.documentElement.scrollWidth - document.documentElement.clientWidth
		);
		expect(overflowPx, `${look} scrolls sideways`).toBeLessThanOrEqual(0);
	}
}

/** A transient of the seed that was decided and observed. */
async function busyTransient(page: Page): Promise<string> {
	const board = (await (await page.request.get('/api/v1/board')).json()) as Board;
	const busiest = [...board.transients].sort((a, b) => b.reports.length - a.reports.length)[0];
	return busiest!.designation;
}

test.describe('axe finds nothing', () => {
	test.beforeEach(() => test.setTimeout(240_000));

	test('on the board and the duty page', async ({ page }) => {
		await signInAs(page, 'duty');
		const designation = await busyTransient(page);
		await expectAccessible(page, `/now?t=${designation}`, EVERY_LOOK);
		await expectAccessible(page, '/duty', EVERY_LOOK);
		await expectAccessible(page, '/now', TWO_LOOKS);
		await expectAccessible(page, '/transients/new', TWO_LOOKS);
	});

	test('on a transient, the list and the slots', async ({ page }) => {
		await signInAs(page, 'observer');
		const designation = await busyTransient(page);
		await expectAccessible(page, `/transients/${designation}`, EVERY_LOOK);
		await expectAccessible(page, '/transients', TWO_LOOKS);
		await expectAccessible(page, '/slots', TWO_LOOKS);
	});

	test('on circulars and their composer', async ({ page }) => {
		await signInAs(page, 'duty');
		const designation = await busyTransient(page);
		await expectAccessible(page, '/circulars/1', EVERY_LOOK);
		await expectAccessible(page, '/circulars', TWO_LOOKS);
		await expectAccessible(page, `/circulars/new?transient=${designation}`, TWO_LOOKS);
	});

	test('on the response page', async ({ page }) => {
		await signInAs(page, 'pi');
		await expectAccessible(page, '/response', EVERY_LOOK);
		await expectAccessible(page, '/response?by=telescope', TWO_LOOKS);
	});

	test('on the network pages', async ({ page }) => {
		await signInAs(page, 'steward');
		await expectAccessible(page, '/network', EVERY_LOOK);
		for (const path of [
			'telescopes/ALM',
			'streams',
			'streams/tambour',
			'quarantine',
			'rota',
			'people'
		]) {
			await expectAccessible(page, `/network/${path}`, TWO_LOOKS);
		}
	});

	test('for a partner', async ({ page }) => {
		await signInAs(page, 'partner');
		for (const path of ['/my/circulars', '/my/preferences', '/my/reports']) {
			await expectAccessible(page, path, TWO_LOOKS);
		}
	});

	test('before signing in', async ({ page }) => {
		await page.goto('/auth/sign-in');
		await expectAccessible(page, '/auth/sign-in', TWO_LOOKS);
		await expectAccessible(page, '/auth/demo', TWO_LOOKS);
	});

	test('on the description of the API', async ({ page }) => {
		await page.goto('/api');
		await expectAccessible(page, '/api', EVERY_LOOK);
	});
});
