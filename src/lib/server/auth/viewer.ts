import { and, eq, isNull } from 'drizzle-orm';
import type { Viewer } from '../../domain/board';
import type { Actor } from '../actor';
import type { App } from '../app';
import { telescope, telescopeObserver } from '../db/schema/network';
import { person } from '../db/schema/people';
import type { Role } from '../../domain/vocabulary';

/** What screens need to know of the person signed in. */
export async function viewerOf(app: App, actor: Actor): Promise<Viewer> {
	const rows = await app.database
		.select({ code: telescope.code })
		.from(telescopeObserver)
		.innerJoin(telescope, eq(telescope.id, telescopeObserver.telescopeId))
		.where(and(eq(telescopeObserver.personId, actor.id), isNull(telescope.retiredAt)))
		.orderBy(telescope.code);
	return { ...actor, telescopeCodes: rows.map((row) => row.code) };
}

export type DemoPerson = {
	id: string;
	name: string;
	organisation: string;
	roles: Role[];
};

/** The seeded people that the demo offers for one-click sign-in; none when the switch is off. */
export async function demoPeople(app: App): Promise<DemoPerson[]> {
	if (!app.config.demo) return [];
	return app.database
		.select({
			id: person.id,
			name: person.name,
			organisation: person.organisation,
			roles: person.roles
		})
		.from(person)
		.where(and(eq(person.seeded, true), isNull(person.disabledAt)))
		.orderBy(person.name);
}
