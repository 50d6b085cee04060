import { z } from 'zod';
import { inviteSchema, personEditSchema } from '$lib/domain/person';
import { formAction } from '$lib/server/http/formAction';
import { loadPage } from '$lib/server/http/page';
import { parseInput } from '$lib/server/http/problem';
import {
	editPerson,
	inviteAgain,
	invitePerson,
	listPeople,
	setDisabled
} from '$lib/server/people/peopleService';
import type { Actions, PageServerLoad } from './$types';

const whoSchema = z.object({ personId: z.uuid('There is no such person.') });
const disableSchema = whoSchema.extend({ disabled: z.enum(['yes', 'no']) });

export const load: PageServerLoad = (event) =>
	loadPage(event, async () => ({
		people: await listPeople(event.locals.app, event.locals.actor)
	}));

export const actions: Actions = {
	invite: (event) =>
		formAction(event, 'editPeople', async (input) => {
			const invite = parseInput(inviteSchema, input);
			await invitePerson(event.locals.app, event.locals.actor, invite);
			return { saved: `${invite.name} is invited; the mail is on its way.` };
		}),
	inviteAgain: (event) =>
		formAction(event, 'editPeople', async (input) => {
			const { personId } = parseInput(whoSchema, input);
			await inviteAgain(event.locals.app, event.locals.actor, personId);
			return { saved: 'The invitation is on its way again.' };
		}),
	save: (event) =>
		formAction(event, 'editPeople', async (input) => {
			const { personId } = parseInput(whoSchema, input);
			const edit = parseInput(personEditSchema, input);
			await editPerson(event.locals.app, event.locals.actor, personId, edit);
			return { saved: `${edit.name} is saved.` };
		}),
	disable: (event) =>
		formAction(event, 'editPeople', async (input) => {
			const { personId, disabled } = parseInput(disableSchema, input);
			await setDisabled(event.locals.app, event.locals.actor, personId, disabled === 'yes');
			return {
				saved:
					disabled === 'yes'
						? 'They are signed out everywhere and can’t sign in.'
						: 'They can sign in again.'
			};
		})
};
