import type { Page } from '@playwright/test';

/**
 * Keeps a picture for the README when DUSKLINE_PICTURES=on; otherwise a run leaves the tree as it was.
 */
export async function takeDocumentationPicture(page: Page, name: string): Promise<void> {
	if (process.env.DUSKLINE_PICTURES !== 'on') return;
	await page.screenshot({ path: `docs/${name}.png`, animations: 'disabled' });
}
