import { and, eq, inArray } from 'drizzle-orm';
import { separationDeg } from '../../sky/vector';
import type { RegionPoints } from '../../sky/regions/jointRegion';
import type { Detector } from '../../sky/visibility/telescope';
import type { App } from '../app';
import type { Transaction } from '../db/database';
import { telescope } from '../db/schema/network';
import { slot } from '../db/schema/slots';
import { region as plannedRegion, transient } from '../db/schema/transients';
import { tellPerson } from '../notify/tellPerson';
import { writeJournal } from '../transients/journalStore';

/** A plan that has lost two thirds of what it held when it was made looks in the wrong place. */
const LEAST_KEPT = 1 / 3;

/**
 * Ends the work on a transient that was retracted: offers lapse, claims are released and leave their
 * telescopes free, and whoever holds one or is on sky is told.
 */
export async function endRetractedWork(
	app: App,
	tx: Transaction,
	transientId: string
): Promise<void> {
	const now = app.now();
	for (const held of await heldSlots(tx, transientId)) {
		if (held.state === 'claimed') {
			await tx.update(slot).set({ state: 'released', endedAt: now }).where(eq(slot.id, held.id));
			await writeJournal(tx, {
				transientId,
				kind: 'slotReleased',
				at: now,
				actorId: null,
				summary: `Released ${held.telescopeName}: the transient was retracted`,
				detail: { slotId: held.id, telescopeId: held.telescopeId }
			});
		}
		await tellPerson(app, tx, {
			personId: held.claimedBy!,
			subject: `${held.designation} was retracted`,
			paragraphs: [
				held.state === 'claimed'
					? `Your claim of ${held.telescopeName} was released.`
					: `${held.telescopeName} is on sky for it: please stop, and report what was seen.`,
				'The stream withdrew its alert: there is nothing left to look for.'
			],
			path: `/transients/${held.designation}`,
			key: `retracted.${held.id}`
		});
	}
}

/** Tells those whose claims point where the new region hardly is, though the one they planned by was there. */
export async function tellOffTarget(
	app: App,
	tx: Transaction,
	transientId: string,
	region: { version: number; points: RegionPoints }
): Promise<void> {
	for (const held of await heldSlots(tx, transientId)) {
		if (held.tiles.length === 0) continue;
		const radiusDeg = reachDeg(held.detectors);
		const share = shareWithin(region.points, held.tiles, radiusDeg);
		const planned = held.plannedBy ? shareWithin(held.plannedBy, held.tiles, radiusDeg) : 0;
		if (share >= planned * LEAST_KEPT) continue;
		await tellPerson(app, tx, {
			personId: held.claimedBy!,
			subject: `${held.designation} has moved`,
			paragraphs: [
				`Your plan for ${held.telescopeName} covered ${percent(planned)} of where it can be, and now covers ${percent(share)}.`,
				'Open the transient and plan anew; your claim stands until you release it.'
			],
			path: `/transients/${held.designation}`,
			key: `moved.${held.id}.${region.version}`
		});
	}
}

const percent = (share: number) => `${Math.round(share * 100)} %`;

async function heldSlots(tx: Transaction, transientId: string) {
	return tx
		.select({
			id: slot.id,
			state: slot.state,
			tiles: slot.tiles,
			claimedBy: slot.claimedBy,
			telescopeId: telescope.id,
			telescopeName: telescope.name,
			detectors: telescope.detectors,
			designation: transient.designation,
			plannedBy: plannedRegion.points
		})
		.from(slot)
		.innerJoin(telescope, eq(telescope.id, slot.telescopeId))
		.innerJoin(transient, eq(transient.id, slot.transientId))
		.leftJoin(
			plannedRegion,
			and(
				eq(plannedRegion.transientId, slot.transientId),
				eq(plannedRegion.version, slot.regionVersion)
			)
		)
		.where(and(eq(slot.transientId, transientId), inArray(slot.state, ['claimed', 'on sky'])));
}

/** From a field's axis to its furthest corner, degrees. */
function reachDeg(detectors: Detector[]): number {
	return Math.max(
		...detectors.map((detector) => {
			const offAxisDeg = Math.hypot(detector.offsetXDeg, detector.offsetYDeg);
			return detector.shape === 'circle'
				? offAxisDeg + detector.radiusDeg
				: offAxisDeg + Math.hypot(detector.widthDeg, detector.heightDeg) / 2;
		})
	);
}

function shareWithin(
	{ raDeg, decDeg, probability }: RegionPoints,
	tiles: { centre: { raDeg: number; decDeg: number } }[],
	radiusDeg: number
): number {
	return probability.reduce((sum, share, i) => {
		const at = { raDeg: raDeg[i]!, decDeg: decDeg[i]! };
		const seen = tiles.some((tile) => separationDeg(tile.centre, at) <= radiusDeg);
		return seen ? sum + share : sum;
	}, 0);
}
