import { expect, test, type Browser, type Page } from '@playwright/test';
import type { Board, BoardOutlookRow, BoardTransient } from '../../src/lib/domain/board';
import type { Role } from '../../src/lib/domain/vocabulary';
import { postAlert } from './support/alerts';
import { latestMail } from './support/deliveries';
import { takeDocumentationPicture } from './support/documentationPicture';
import { positionInTheNight } from './support/nightSky';
import { signInAs } from './support/signIn';

const PARTNER = { name: 'Ewan Nakagawa', email: 'ewan.nakagawa@tidewater.example' };
/** Who works with each telescope of the demo, two at least. */
const OBSERVERS: Record<string, [first: string, second: string]> = {
	ALM: ['Moana Ortega', 'Mateo Quispe-Lund'],
	PUN: ['Rui Takahara-Wynn', 'Mateo Quispe-Lund'],
	KAI: ['Moana Ortega', 'Yui Castellanos'],
	SPL: ['Moana Ortega', 'Rui Takahara-Wynn'],
	DRK: ['Sizwe Lindgaard', 'Kofi Brännström'],
	RDV: ['Beatriz Achterberg', 'Kofi Brännström'],
	SKA: ['Beatriz Achterberg', 'Batu Ferreira'],
	WIR: ['Yui Castellanos', 'Rui Takahara-Wynn'],
	ASR: ['Sizwe Lindgaard', 'Kofi Brännström'],
	TSA: ['Kofi Brännström', 'Batu Ferreira'],
	SHK: ['Yui Castellanos', 'Batu Ferreira'],
	KOW: ['Yui Castellanos', 'Rui Takahara-Wynn'],
	DVE: ['Sizwe Lindgaard', 'Batu Ferreira']
};

/** A window of its own, signed in by the demo page: people of the story do not share a session. */
async function enter(
	browser: Browser,
	role: Role,
	name?: string,
	viewport = { width: 1440, height: 900 }
): Promise<Page> {
	const context = await browser.newContext({ viewport });
	const page = await context.newPage();
	await signInAs(page, role, name);
	return page;
}

/** The role a person is listed under on the demo's sign-in page. */
const listedRole = (name: string): Role =>
	name === 'Mateo Quispe-Lund' ? 'duty' : name === 'Rui Takahara-Wynn' ? 'pi' : 'observer';

async function boardEntry(page: Page, designation: string): Promise<BoardTransient> {
	const board = (await (await page.request.get('/api/v1/board')).json()) as Board;
	return board.transients.find((item) => item.designation === designation)!;
}

/** A row whose telescope can point there now and for the next 40 minutes. */
function openNow(transient: BoardTransient): BoardOutlookRow | undefined {
	const nowMs = Date.now();
	return transient.outlook?.rows.find((row) =>
		row.windows.some(
			(window) =>
				Date.parse(window.startAt) < nowMs && Date.parse(window.endAt) > nowMs + 40 * 60_000
		)
	);
}

async function countOf(page: Page, step: RegExp): Promise<number> {
	await page.goto('/response');
	const row = page.getByRole('row').filter({ has: page.getByRole('rowheader', { name: step }) });
	// Median, 90 %, still open, begun.
	return Number(await row.getByRole('cell').nth(3).innerText());
}

test('from the first packet to the partner’s inbox', async ({ browser }) => {
	test.setTimeout(180_000);
	const pi = await enter(browser, 'pi', 'Adaeze Lindqvist');
	const countedBefore = await countOf(pi, /Claim to first exposure/);

	// A packet comes in by HTTP and appears on an open board by polling.
	const desk = await enter(browser, 'duty', 'Noor Halvorsen');
	await desk.goto('/now');
	await expect(desk.getByRole('heading', { name: 'Open transients' })).toBeVisible();
	const centre = positionInTheNight(Date.now(), 4);
	const t0 = new Date(Date.now() - 40_000).toISOString();
	const first = await postAlert('tambour', {
		packetId: 'TB-story',
		serial: 1,
		role: 'observation',
		kind: 'report',
		t0,
		shape: { kind: 'circle', centre, radiusDeg: 3.2, containment: 0.9 },
		significance: 9.4,
		falseAlarmPerYear: 0.1
	});
	expect(first.status).toBe(201);
	const designation = String(first.body.designation);
	const listed = desk
		.getByRole('region', { name: 'Open transients' })
		.getByRole('link', { name: new RegExp(designation) });
	await expect(listed).toBeVisible();
	await listed.click();
	await expect(desk.getByRole('heading', { name: designation })).toBeVisible();

	// Taken with the thumb on a phone.
	const phone = await enter(browser, 'duty', 'Hana Petrossian', { width: 360, height: 740 });
	await phone.goto(`/duty?t=${designation}`);
	await expect(phone.getByRole('heading', { name: designation })).toBeVisible();
	await takeDocumentationPicture(phone, 'duty');
	await phone.getByRole('button', { name: 'Take it' }).click();
	await expect(phone.getByText(/You took this at/)).toBeVisible();
	await phone.getByRole('button', { name: 'Chase' }).click();
	await expect(phone.getByText(/You decided/)).toBeVisible();
	await expect(desk.getByText('Hana Petrossian, at')).toBeVisible();

	// A refined position shrinks the region.
	const before = (await boardEntry(desk, designation)).region!.area90Deg2;
	expect(before).toBeGreaterThan(30);
	const refined = await postAlert('carapace', {
		packetId: 'CP-story',
		serial: 1,
		role: 'observation',
		kind: 'report',
		cites: [{ stream: 'tambour', packetId: 'TB-story', relation: 'followup' }],
		t0,
		shape: {
			kind: 'circle',
			centre: { raDeg: centre.raDeg, decDeg: centre.decDeg - 0.8 },
			radiusDeg: 0.035,
			containment: 0.9
		}
	});
	expect(refined.body.designation).toBe(designation);
	await expect(desk.getByText('was 32.2 deg²')).toBeVisible();
	await expect
		.poll(async () => (await boardEntry(desk, designation)).outlook?.regionVersion)
		.toBe(2);
	const shown = await boardEntry(desk, designation);
	expect(shown.region!.area90Deg2).toBeLessThan(0.005);
	const row = openNow(shown);
	expect(row, 'a telescope that can point there now').toBeTruthy();
	const telescopeCode = row!.telescopeCode;

	// One observer claims, the second is refused and told who has it.
	const [winner, loser] = OBSERVERS[telescopeCode]!;
	const observer = await enter(browser, listedRole(winner), winner);
	const rival = await enter(browser, listedRole(loser), loser);
	for (const page of [observer, rival]) {
		await page.goto(`/now?t=${designation}`);
		await page
			.getByTestId(`outlook-${telescopeCode}`)
			.getByRole('button', { name: /^Claim / })
			.click();
	}
	await observer.getByRole('dialog').getByRole('button', { name: 'Claim it' }).click();
	await expect(observer.getByRole('dialog')).toBeHidden();
	await rival.getByRole('dialog').getByRole('button', { name: 'Claim it' }).click();
	await expect(rival.getByRole('dialog').getByTestId('held-by')).toContainText(`${winner} has it`);
	await takeDocumentationPicture(desk, 'board');

	// On sky, then the report.
	await observer.getByRole('button', { name: /^Your slot on / }).click();
	await observer.getByRole('dialog').getByRole('button', { name: 'On sky' }).click();
	await expect(observer.getByRole('dialog')).toBeHidden();
	await observer.getByRole('button', { name: /^Your slot on / }).click();
	await observer.getByRole('dialog').getByRole('button', { name: 'Report' }).click();
	await observer.getByLabel('Magnitude').fill('19.31');
	await observer.getByLabel('Its error').fill('0.05');
	await observer.getByRole('button', { name: 'Send report' }).click();
	await expect(observer.getByRole('dialog')).toBeHidden();
	await expect
		.poll(async () => (await boardEntry(desk, designation)).reports.map((item) => item.kind))
		.toEqual(['detection']);

	// The circular reaches the partner's inbox.
	await desk.goto(`/circulars/new?transient=${designation}`);
	await expect(desk.getByRole('textbox', { name: 'Text' })).toHaveValue(/19\.31/);
	await desk.getByRole('button', { name: 'Publish' }).click();
	await expect(desk).toHaveURL(/\/circulars\/\d+$/);
	const mail = await latestMail(PARTNER.email, designation);
	expect(mail.text).toContain('19.31');
	await expect(desk.getByRole('row').filter({ hasText: PARTNER.name })).toContainText(/sent/i);

	// And the table counts it.
	expect(await countOf(pi, /Claim to first exposure/)).toBe(countedBefore + 1);
});
