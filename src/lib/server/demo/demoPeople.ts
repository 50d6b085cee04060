import type { Role } from '../../domain/vocabulary';
import type { Transaction } from '../db/database';
import { subscription } from '../db/schema/circulars';
import { person } from '../db/schema/people';

export type DemoPerson = {
	name: string;
	initials: string;
	email: string;
	organisation: string;
	roles: Role[];
	/** Codes of the telescopes an observer works with. */
	telescopes?: string[];
	/** A partner's streams; empty means all. */
	streamCodes?: string[];
	/** A partner's own telescope, standing in for one near theirs. */
	ownTelescope?: string;
};

/** Invented for the demo; the addresses are in domains reserved for examples (RFC 2606). */
export const DEMO_PEOPLE: readonly DemoPerson[] = [
	staff('Noor Halvorsen', 'NH', ['duty']),
	staff('Mateo Quispe-Lund', 'MQ', ['duty', 'observer'], ['ALM', 'PUN']),
	staff('Hana Petrossian', 'HP', ['duty']),
	staff('Moana Ortega', 'MO', ['observer'], ['ALM', 'KAI', 'SPL']),
	staff('Sizwe Lindgaard', 'SL', ['observer'], ['DRK', 'ASR', 'DVE']),
	staff('Beatriz Achterberg', 'BA', ['observer'], ['RDV', 'SKA']),
	staff('Kofi Brännström', 'KB', ['observer'], ['RDV', 'DRK', 'ASR', 'TSA']),
	staff('Yui Castellanos', 'YC', ['observer'], ['WIR', 'KOW', 'KAI', 'SHK']),
	staff('Batu Ferreira', 'BF', ['observer'], ['TSA', 'SHK', 'SKA', 'DVE']),
	staff('Adaeze Lindqvist', 'AL', ['pi']),
	staff('Rui Takahara-Wynn', 'RT', ['pi', 'observer'], ['PUN', 'SPL', 'WIR', 'KOW']),
	staff('Ilse Okonjo', 'IO', ['steward']),
	staff('Tomasz Villareal', 'TV', ['steward', 'pi']),
	{
		name: 'Farida Castellan',
		initials: 'FC',
		email: 'farida.castellan@larkrise.example',
		organisation: 'Larkrise Radio Array',
		roles: ['partner'],
		streamCodes: [],
		ownTelescope: 'ASR'
	},
	{
		name: 'Ewan Nakagawa',
		initials: 'EN',
		email: 'ewan.nakagawa@tidewater.example',
		organisation: 'Tidewater Spectroscopy Group',
		roles: ['partner'],
		streamCodes: ['carapace', 'needle'],
		ownTelescope: 'RDV'
	},
	{
		name: 'Priya Oyelaran',
		initials: 'PO',
		email: 'priya.oyelaran@longmoor.example',
		organisation: 'Longmoor Amateur Network',
		roles: ['partner'],
		streamCodes: ['tambour'],
		ownTelescope: 'KOW'
	}
];

function staff(
	name: string,
	initials: string,
	roles: Role[],
	telescopes: string[] = []
): DemoPerson {
	const address = name
		.normalize('NFD')
		.replace(/[^A-Za-z ]/g, '')
		.toLowerCase()
		.replaceAll(' ', '.');
	return {
		name,
		initials,
		email: `${address}@duskline.example`,
		organisation: 'Duskline follow-up network',
		roles,
		telescopes
	};
}

/** Everybody who has been seeded, by initials. */
export type SeededPeople = Map<string, { id: string; name: string; person: DemoPerson }>;

/** Inserts the people; they joined when the 90-day history begins. */
export async function seedPeople(tx: Transaction, joinedAt: Date): Promise<SeededPeople> {
	const rows = await tx
		.insert(person)
		.values(
			DEMO_PEOPLE.map(({ name, initials, email, organisation, roles }) => ({
				name,
				initials,
				email,
				organisation,
				roles,
				seeded: true,
				emailVerified: joinedAt,
				invitedAt: joinedAt,
				joinedAt
			}))
		)
		.returning({ id: person.id, email: person.email, name: person.name });
	const byEmail = new Map(rows.map((row) => [row.email, row]));
	return new Map(
		DEMO_PEOPLE.map((demoPerson) => {
			const { id, name } = byEmail.get(demoPerson.email)!;
			return [demoPerson.initials, { id, name, person: demoPerson }];
		})
	);
}

/** Subscribes the partners by e-mail, with the telescope whose outlook they want. */
export async function seedSubscriptions(
	tx: Transaction,
	people: SeededPeople,
	telescopeIds: Map<string, string>,
	at: Date
): Promise<void> {
	const partners = [...people.values()].filter(({ person: one }) => one.roles.includes('partner'));
	await tx.insert(subscription).values(
		partners.map(({ id, person: one }) => ({
			personId: id,
			byEmail: true,
			streamCodes: one.streamCodes ?? [],
			telescopeId: one.ownTelescope ? (telescopeIds.get(one.ownTelescope) ?? null) : null,
			updatedAt: at
		}))
	);
}
