import { expect, test } from '@playwright/test';
import { addresses } from './support/addresses';
import { forgetMail, latestMail } from './support/deliveries';
import { signInAs } from './support/signIn';

const INVITED = 'farida.castellan@larkrise.example';

function linkIn(text: string): string {
	return /https?:\/\/\S+/.exec(text)![0];
}

test('an invited person signs in by the mailed link, once', async ({ page, browser }) => {
	await page.goto('/now');
	await expect(page).toHaveURL(/\/auth\/sign-in\?to=%2Fnow/);
	await page.goto('/auth/sign-in?to=%2Fmy%2Fpreferences');
	await page.getByLabel('E-mail address').fill(INVITED.toUpperCase());
	await page.getByRole('button', { name: 'Send me a link' }).click();
	await expect(page.getByRole('heading', { name: 'Look in your mail' })).toBeVisible();
	const link = linkIn((await latestMail(INVITED, 'sign-in link')).text);
	expect(link.startsWith(`${addresses().origin}/auth/confirm?`)).toBe(true);

	// A mail scanner that follows the link does not use it up.
	await page.request.get(link);
	await page.goto(link);
	await page.getByRole('button', { name: 'Sign in' }).click();
	await expect(page).toHaveURL(/\/my\/preferences$/);

	const other = await (await browser.newContext()).newPage();
	await other.goto(link);
	await other.getByRole('button', { name: 'Sign in' }).click();
	await expect(other.getByRole('alert')).toContainText('used or has run out');
});

test('nobody else gets a mail, and the answer does not tell', async ({ page, request }) => {
	await forgetMail();
	await page.goto('/auth/sign-in');
	await page.getByLabel('E-mail address').fill('stranger@elsewhere.example');
	await page.getByRole('button', { name: 'Send me a link' }).click();
	await expect(page.getByRole('heading', { name: 'Look in your mail' })).toBeVisible();
	const mails = await request.get(`${addresses().mailboxUrl}/api/messages`);
	expect(await mails.json()).toEqual([]);
});

test('the mailed link points at the configured origin, whatever the request’s headers say', async ({
	request
}) => {
	const { origin } = addresses();
	const response = await request.post('/auth/sign-in', {
		headers: { origin, 'x-forwarded-host': 'evil.example', 'x-forwarded-proto': 'https' },
		form: { email: INVITED }
	});
	expect(response.ok()).toBe(true);
	const link = linkIn((await latestMail(INVITED, 'sign-in link')).text);
	expect(link.startsWith(`${origin}/auth/confirm?`)).toBe(true);
	expect(link).not.toContain('evil.example');
});

test('requests from another origin are refused', async ({ page, request }) => {
	await signInAs(page, 'duty');
	const { origin } = addresses();
	const strangers: Record<string, string>[] = [
		{},
		{ origin: 'https://evil.example' },
		{ origin: 'null' }
	];
	for (const headers of strangers) {
		const form = await request.post('/auth/demo', { headers, form: { person: 'x' } });
		expect(form.status()).toBe(403);
		const json = await page.request.post('/api/v1/transients/D26L01-a/take', { headers, data: {} });
		expect(json.status()).toBe(403);
		expect(json.headers()['content-type']).toBe('application/problem+json');
	}
	const own = await page.request.post('/api/v1/transients/D01A01-zz/take', {
		headers: { origin },
		data: {}
	});
	expect(own.status()).toBe(404);
});

test('signing out ends the session', async ({ page }) => {
	await signInAs(page, 'pi');
	const cookies = await page.context().cookies();
	await page.request.post('/auth/sign-out', {
		headers: { origin: addresses().origin },
		form: {}
	});
	await page.context().addCookies(cookies);
	await page.goto('/now');
	await expect(page).toHaveURL(/\/auth\/sign-in/);
});
