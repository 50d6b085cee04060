import { readFileSync } from 'node:fs';
import AxeBuilder from '@axe-core/playwright';
import { expect, test } from '@playwright/test';
import { signInAs } from './support/signIn';

test('a duty scientist enters a map from a file, and takes the region away as files', async ({
	page
}) => {
	await page.setViewportSize({ width: 360, height: 740 });
	await signInAs(page, 'duty');
	await page.goto('/transients');
	await page.getByRole('link', { name: 'Enter a map' }).click();
	await expect(page.getByRole('heading', { name: 'Enter a map' })).toBeVisible();
	const { violations } = await new AxeBuilder({ page }).analyze();
	expect(violations.map(({ id }) => id)).toEqual([]);

	await page.getByLabel('Packet name').fill(`MAP-${Date.now()}`);
	await page.getByLabel('T0').fill('2026-01-05 02:30:00');
	const file = page.getByLabel('File');
	const enter = page.getByRole('button', { name: 'Enter the map' });

	await file.setInputFiles({ name: 'x.fits', mimeType: '', buffer: Buffer.from('PK\u0003\u0004') });
	await enter.click();
	await expect(page.getByRole('alert')).toContainText('The file can’t be read');
	await expect(page.getByText('byte 2 is no text')).toBeVisible();

	// What a screen reader is told meanwhile.
	await page.evaluate(() => {
		const told: string[] = [];
		const live = document.querySelector('form [aria-live]')!;
		new MutationObserver(() => told.push(live.textContent ?? '')).observe(live, {
			childList: true,
			characterData: true,
			subtree: true
		});
		Object.assign(window, { told });
	});
	await file.setInputFiles('fixtures/sky/mo_gauss3deg.fits');
	await enter.click();
	const link = page.getByRole('link', { name: /^Go to D26A05/ });
	await expect(link).toBeVisible({ timeout: 15_000 });
	const told = await page.evaluate(() => (window as unknown as { told: string[] }).told);
	expect(told.join()).toContain('Reading the file');

	const designation = (await link.textContent())!.replace('Go to ', '').trim();
	await link.click();
	await expect(page.getByRole('heading', { name: designation })).toBeVisible();
	const map = await page.request.get(`/api/v1/transients/${designation}/region.fits`);
	expect(map.headers()['content-disposition']).toBe(`attachment; filename="${designation}.fits"`);
	expect((await map.body()).subarray(0, 9).toString()).toBe('SIMPLE  =');
	const moc = await page.request.get(`/api/v1/transients/${designation}/region.moc?format=ascii`);
	expect(await moc.text()).toMatch(/^\d+\/\d/);
	expect((await map.body()).length).toBeGreaterThan(
		readFileSync('fixtures/sky/mo_gauss3deg.fits').length / 4
	);
});
