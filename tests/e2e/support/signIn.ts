import type { Page } from '@playwright/test';
import { ROLE_LABELS, type Role } from '../../../src/lib/domain/vocabulary';

/** Signs in by the demo page as the named person, or as the first one it lists for the role. */
export async function signInAs(page: Page, role: Role, name?: string): Promise<void> {
	await page.goto('/auth/demo');
	const group = page.locator('div').filter({
		has: page.locator(':scope > h2', { hasText: ROLE_LABELS[role] })
	});
	const buttons = group.getByRole('button');
	await (name ? buttons.filter({ hasText: name }) : buttons.first()).click();
	await page.waitForURL((url) => !url.pathname.startsWith('/auth/'));
}
