import type { JournalKind } from '../../domain/vocabulary';
import type { Executor } from '../db/database';
import { journal } from '../db/schema/transients';

export type JournalEntry = {
	transientId: string;
	kind: JournalKind;
	at: Date;
	/** Null when the system or a stream did it. */
	actorId: string | null;
	/** One plain sentence, without the actor's name in front. */
	summary: string;
	detail?: Record<string, unknown>;
};

/** Adds entries to the append-only journal, in the caller's transaction. */
export async function writeJournal(tx: Executor, ...entries: JournalEntry[]): Promise<void> {
	if (entries.length > 0) await tx.insert(journal).values(entries);
}
