import type { AlertContent } from '../../domain/alertPacket';
import type { stream } from '../db/schema/alerts';

export type StreamRow = typeof stream.$inferSelect;

export type { AlertContent };

/** A body as a reader gets it. */
export type KeptPacket = {
	id: number;
	contentType: string;
	body: Buffer;
	fileKey: string | null;
	fileName: string | null;
	receivedAt: Date;
};

/**
 * What a reader makes of a body: an alert with notes for the journal (what was converted or folded), or a
 * packet that is kept but is no alert. It throws a DomainError for what can't be read.
 */
export type ReadOutcome =
	| {
			kind: 'alert';
			content: AlertContent;
			notes: string[];
			/** The content's map is in its normal form already. */
			hasNormalShape?: true;
	  }
	| { kind: 'noted'; reason: string };
