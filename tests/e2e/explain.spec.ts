import AxeBuilder from '@axe-core/playwright';
import { expect, test, type Page } from '@playwright/test';
import type { Board } from '../../src/lib/domain/board';
import { THEMES } from '../../src/lib/domain/vocabulary';
import { signInAs } from './support/signIn';

async function board(page: Page): Promise<Board> {
	return (await (await page.request.get('/api/v1/board')).json()) as Board;
}

test('each number of the board opens how it comes about, by keyboard too', async ({ page }) => {
	await signInAs(page, 'duty');
	const { transients } = await board(page);
	const shown = transients.find(({ outlook, parts }) => outlook && parts.length > 1)!;
	await page.goto(`/now?t=${shown.designation}`);
	for (const label of [
		'Joint region, 90 %',
		'Centre (ICRS)',
		'Do the alerts agree?',
		'Best telescope now',
		'Catch chance, network'
	]) {
		const button = page.getByRole('button', { name: label, exact: true });
		await button.focus();
		await page.keyboard.press('Enter');
		const dialog = page.getByRole('dialog', { name: `${label}: how it comes about` });
		await expect(dialog).toBeVisible();
		if (label !== 'Best telescope now') {
			await expect(dialog).toContainText(shown.parts[0]!.streamName);
		}
		await page.keyboard.press('Escape');
		await expect(dialog).toBeHidden();
		await expect(button).toBeFocused();
	}
});

test('a telescope’s numbers open from its row; axe finds nothing and 360 px are enough', async ({
	page
}) => {
	test.setTimeout(180_000);
	await signInAs(page, 'duty');
	const { transients } = await board(page);
	const shown = transients.find(({ outlook }) => outlook && outlook.rows.length > 0)!;
	const rows = shown.outlook!.rows;
	const forbidden = rows.find((row) => row.forbidden?.missingDeg != null) ?? rows[0]!;
	for (const theme of THEMES) {
		for (const width of [360, 1440]) {
			await page
				.context()
				.addCookies([{ name: 'duskline-theme', value: theme, url: new URL(page.url()).origin }]);
			await page.setViewportSize({ width, height: 800 });
			await page.goto(`/now?t=${shown.designation}`);
			const row = page.getByTestId(`outlook-${forbidden.telescopeCode}`);
			const dialog = page.getByRole('dialog');
			await expect(async () => {
				await row.getByRole('button', { name: 'how they come about' }).click();
				await expect(dialog).toBeVisible({ timeout: 1000 });
			}).toPass();
			for (const part of ['Catch', 'Reach', 'Opens']) {
				await expect(dialog.getByRole('heading', { name: part })).toBeVisible();
			}
			if (forbidden.forbidden)
				await expect(dialog).toContainText(/Forbidden by .* It comes within/);
			const { violations } = await new AxeBuilder({ page })
				.withTags(['wcag2a', 'wcag2aa', 'wcag21a', 'wcag21aa', 'wcag22aa', 'best-practice'])
				.analyze();
			const look = `${theme} at ${width} px`;
			expect(
				violations.map(({ id, nodes }) => `${id}: ${nodes.map((node) => node.html).join(' | ')}`),
				look
			).toEqual([]);
			const overflowPx = await dialog.evaluate((item) => item.scrollWidth - item.clientWidth);
			expect(overflowPx, look).toBeLessThanOrEqual(0);
			if (process.env.DUSKLINE_SHOTS) {
				await page.screenshot({
					path: `${process.env.DUSKLINE_SHOTS}/explain-${theme}-${width}.png`
				});
			}
			await dialog.getByRole('button', { name: 'Close' }).click();
			await expect(dialog).toBeHidden();
		}
	}
});

test('transients are found by a pasted position', async ({ page }) => {
	await signInAs(page, 'duty');
	const { transients } = await board(page);
	const shown = transients.find(({ region }) => region)!;
	const { raDeg, decDeg } = shown.region!.centre;
	await page.goto('/transients');
	await page.getByLabel('Region touches position').fill(`${raDeg} ${decDeg}`);
	await page.getByLabel('Within').fill('0.1');
	await page.getByRole('button', { name: 'Show' }).click();
	await expect(page).toHaveURL(/position=/);
	await expect(page.getByRole('link', { name: shown.designation })).toBeVisible();
	await page.getByLabel('Region touches position').fill('over there');
	await page.getByRole('button', { name: 'Show' }).click();
	await expect(page.getByText('Not read as a position')).toBeVisible();
});
