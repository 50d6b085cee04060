import { eq } from 'drizzle-orm';
import { afterEach, beforeEach, describe, expect, test } from 'vitest';
import { openWorld, type World } from '../../../../tests/database/world';
import { inviteSchema, personEditSchema } from '../../domain/person';
import type { Actor } from '../actor';
import { actorOfSession, openSession } from '../auth/session';
import { telescopeObserver } from '../db/schema/network';
import { person } from '../db/schema/people';
import { invitationMail } from './invitationMail';
import { editPerson, inviteAgain, invitePerson, listPeople, setDisabled } from './peopleService';

let world: World;
let steward: Actor;

beforeEach(async () => {
	world = await openWorld();
	steward = await world.person('steward');
});
afterEach(() => world.close());

const NEW = inviteSchema.parse({
	email: ' Ada.Fjord@Example.org ',
	name: 'Ada Fjord',
	initials: 'af',
	roles: ['partner', 'observer', 'observer']
});

const edited = (roles: string[], initials = 'AB') =>
	personEditSchema.parse({ name: 'Changed Name', initials, organisation: '', roles });

describe('inviting', () => {
	test('keeps the address in lower case and queues the mail', async () => {
		const { id } = await invitePerson(world.app, steward, NEW);
		const [row] = await world.app.database.select().from(person).where(eq(person.id, id));
		expect(row).toMatchObject({
			email: 'ada.fjord@example.org',
			initials: 'AF',
			roles: ['observer', 'partner']
		});
		expect(world.waitingJobs()).toEqual(['people.sendInvitation']);
		const listed = await listPeople(world.app, steward);
		expect(listed.find((one) => one.id === id)).toMatchObject({ state: 'invited' });
	});

	test('twice names who has the address and sends nothing', async () => {
		await invitePerson(world.app, steward, NEW);
		const again = invitePerson(world.app, steward, { ...NEW, initials: 'XY' });
		await expect(again).rejects.toMatchObject({
			code: 'nameTaken',
			errors: [{ pointer: '/email', detail: expect.stringContaining('Ada Fjord') as string }]
		});
		expect(world.waitingJobs()).toHaveLength(1);
	});

	test('by two stewards at once makes one person', async () => {
		const tries = Array.from({ length: 6 }, () => invitePerson(world.app, steward, NEW));
		const results = await Promise.allSettled(tries);
		expect(results.filter(({ status }) => status === 'fulfilled')).toHaveLength(1);
		expect(world.waitingJobs()).toHaveLength(1);
	});

	test('refuses initials that stand for somebody else', async () => {
		await invitePerson(world.app, steward, NEW);
		const other = { ...NEW, email: 'other@example.org' };
		await expect(invitePerson(world.app, steward, other)).rejects.toMatchObject({
			errors: [{ pointer: '/initials' }]
		});
	});

	test('again is possible until they have signed in', async () => {
		const { id } = await invitePerson(world.app, steward, NEW);
		await inviteAgain(world.app, steward, id);
		expect(world.waitingJobs()).toHaveLength(2);
		await world.app.database
			.update(person)
			.set({ joinedAt: world.app.now() })
			.where(eq(person.id, id));
		await expect(inviteAgain(world.app, steward, id)).rejects.toMatchObject({ code: 'wrongState' });
	});

	test('is for stewards, and addresses are shown to stewards only', async () => {
		const pi = await world.person('pi');
		await expect(invitePerson(world.app, pi, NEW)).rejects.toMatchObject({ code: 'notAllowed' });
		const listed = await listPeople(world.app, pi);
		expect(listed.every(({ email }) => email === null)).toBe(true);
	});
});

describe('the last steward', () => {
	test('can’t lose the role or be disabled', async () => {
		await expect(
			editPerson(world.app, steward, steward.id, edited(['duty']))
		).rejects.toMatchObject({ code: 'wrongState', errors: [{ pointer: '/roles' }] });
		await expect(setDisabled(world.app, steward, steward.id, true)).rejects.toMatchObject({
			code: 'wrongState'
		});
	});

	test('stays when two stewards demote each other at once', async () => {
		const second = await world.person('steward');
		const results = await Promise.allSettled([
			editPerson(world.app, steward, second.id, edited(['duty'], 'CD')),
			editPerson(world.app, second, steward.id, edited(['duty'], 'EF'))
		]);
		expect(results.filter(({ status }) => status === 'fulfilled')).toHaveLength(1);
	});

	test('can go once there is another', async () => {
		await world.person('steward');
		await editPerson(world.app, steward, steward.id, edited(['duty']));
		const listed = await listPeople(world.app, steward);
		expect(listed.find(({ id }) => id === steward.id)!.roles).toEqual(['duty']);
	});
});

test('disabling ends the sessions at once; letting in again does not revive them', async () => {
	const observer = await world.person('observer');
	const token = await openSession(world.app, observer.id);
	expect((await actorOfSession(world.app, token))?.id).toBe(observer.id);
	await setDisabled(world.app, steward, observer.id, true);
	expect(await actorOfSession(world.app, token)).toBeNull();
	await setDisabled(world.app, steward, observer.id, false);
	expect(await actorOfSession(world.app, token)).toBeNull();
});

test('who stops being an observer leaves their telescopes', async () => {
	const observer = await world.person('observer');
	await world.telescope('ALM', [observer]);
	await editPerson(world.app, steward, observer.id, edited(['duty']));
	expect(await world.app.database.select().from(telescopeObserver)).toEqual([]);
});

test('the invitation escapes names and leads to the sign-in page', () => {
	const mail = invitationMail(
		{
			personId: 'p',
			to: 'a@example.org',
			name: '<b>Ada</b>',
			roles: ['duty', 'pi'],
			invitedBy: 'Eve & Co',
			invitedAtMs: 1
		},
		'https://duskline.example'
	);
	expect(mail.text).toContain('https://duskline.example/auth/sign-in');
	expect(mail.text).toContain('duty scientist, pi');
	expect(mail.html).not.toContain('<b>');
	expect(mail.html).toContain('Eve &amp; Co');
});
