import AxeBuilder from '@axe-core/playwright';
import { expect, test, type Page } from '@playwright/test';
import { THEMES } from '../../src/lib/domain/vocabulary';
import type { Board } from '../../src/lib/domain/board';
import { signInAs } from './support/signIn';

const WIDTHS = [360, 768, 1440];
/** WCAG 2.2 AA and what axe counts as good practice. */
const TAGS = ['wcag2a', 'wcag2aa', 'wcag21a', 'wcag21aa', 'wcag22aa', 'best-practice'];

async function expectAccessible(page: Page, path: string): Promise<void> {
	for (const theme of THEMES) {
		await page
			.context()
			.addCookies([{ name: 'duskline-theme', value: theme, url: new URL(page.url()).origin }]);
		for (const width of WIDTHS) {
			await page.setViewportSize({ width, height: width < 500 ? 740 : 900 });
			await page.goto(path);
			await expect(page.locator('h1, h2').first()).toBeVisible();
			const { violations } = await new AxeBuilder({ page }).withTags(TAGS).analyze();
			const found = violations.map(
				({ id, nodes }) => `${id}: ${nodes.map((node) => node.target.join(' ')).join(' | ')}`
			);
			expect(found, `${path} in ${theme} at ${width} px`).toEqual([]);
			const overflowPx = await page.evaluate(
				() => document.documentElement.scrollWidth - document.documentElement.clientWidth
			);
			expect(overflowPx, `${path} in ${theme} at ${width} px scrolls sideways`).toBeLessThanOrEqual(
				0
			);
		}
	}
}

/** A transient of the seed that was decided and observed. */
async function busyTransient(page: Page): Promise<string> {
	const board = (await (await page.request.get('/api/v1/board')).json()) as Board;
	const busiest = [...board.transients].sort((a, b) => b.reports.length - a.reports.length)[0];
	return busiest!.designation;
}

test.describe('axe finds nothing in any theme at any width', () => {
	test.beforeEach(() => test.setTimeout(180_000));

	test('for a duty scientist', async ({ page }) => {
		await signInAs(page, 'duty');
		const designation = await busyTransient(page);
		await expectAccessible(page, `/now?t=${designation}`);
		await expectAccessible(page, '/now');
		await expectAccessible(page, '/duty');
	});

	test('on a transient, the list and the slots', async ({ page }) => {
		await signInAs(page, 'observer');
		const designation = await busyTransient(page);
		await expectAccessible(page, `/transients/${designation}`);
		await expectAccessible(page, '/transients');
		await expectAccessible(page, '/slots');
	});

	test('on circulars and their composer', async ({ page }) => {
		await signInAs(page, 'duty');
		const designation = await busyTransient(page);
		await expectAccessible(page, '/circulars');
		await expectAccessible(page, `/circulars/new?transient=${designation}`);
		await expectAccessible(page, '/circulars/1');
	});

	test('on the response page', async ({ page }) => {
		await signInAs(page, 'pi');
		await expectAccessible(page, '/response');
	});

	test('on the network pages', async ({ page }) => {
		await signInAs(page, 'steward');
		await expectAccessible(page, '/network');
		await expectAccessible(page, '/network/telescopes/ALM');
		await expectAccessible(page, '/network/streams');
		await expectAccessible(page, '/network/rota');
		await expectAccessible(page, '/network/people');
	});

	test('for a partner', async ({ page }) => {
		await signInAs(page, 'partner');
		await expectAccessible(page, '/my/circulars');
		await expectAccessible(page, '/my/preferences');
		await expectAccessible(page, '/my/reports');
	});

	test('before signing in', async ({ page }) => {
		await page.goto('/auth/sign-in');
		await expectAccessible(page, '/auth/sign-in');
		await expectAccessible(page, '/auth/demo');
	});
});
