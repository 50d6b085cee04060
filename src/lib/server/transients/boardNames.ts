import type { PersonRef } from '../../domain/board';
import type { Executor } from '../db/database';
import { telescope } from '../db/schema/network';
import { person } from '../db/schema/people';

export type Named = { id: string; name: string; initials: string };
export type TelescopeName = { id: string; code: string; name: string };

/** Whom and what the board's rows name by their identity. */
export type BoardNames = {
	personOf: (id: string) => Named | undefined;
	telescopeOf: (id: string) => TelescopeName | undefined;
};

export async function boardNames(executor: Executor): Promise<BoardNames> {
	const people = await executor
		.select({ id: person.id, name: person.name, initials: person.initials })
		.from(person);
	const telescopes = await executor
		.select({ id: telescope.id, code: telescope.code, name: telescope.name })
		.from(telescope);
	return { personOf: lookup(people), telescopeOf: lookup(telescopes) };
}

function lookup<Row extends { id: string }>(rows: Row[]): (id: string) => Row | undefined {
	const byId = new Map(rows.map((row) => [row.id, row]));
	return (id) => byId.get(id);
}

export function personRef(row: Named | undefined): PersonRef {
	return row
		? { id: row.id, name: row.name, initials: row.initials }
		: { id: '', name: 'somebody', initials: '?' };
}
