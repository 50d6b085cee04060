import type { Membership } from '../../domain/vocabulary';
import {
	JOIN_LOG_ODDS,
	START_LOG_ODDS,
	logBayesFactor,
	logBayesOfJoining,
	logPriorOdds
} from '../../sky/regions/agreement';
import type { Shape } from '../../sky/regions/shape';
import type { App } from '../app';
import type { Transaction } from '../db/database';
import type { Citation } from '../db/schema/alerts';
import {
	citedAlerts,
	citingAlerts,
	liveParts,
	nearbyTransients,
	type AlertRow,
	type LivePart
} from './alertStore';
import type { AlertContent } from '../packets/readOutcome';

/** Where an alert goes and what its arrival withdraws. */
export type Placement = {
	/** Null: it starts a transient of its own. */
	transientId: string | null;
	membership: Membership;
	logOdds: number | null;
	/** Alerts whose parts it replaces or retracts. */
	withdrawn: AlertRow[];
	/** False when something that arrived earlier already supersedes or retracts it. */
	live: boolean;
	/** It asks to replace or retract another stream's alert, which only its own stream can: that one stands. */
	overreaches: boolean;
};

export type Arrival = {
	packet: AlertContent;
	/** What is known of this packet already, every serial of it. */
	serials: AlertRow[];
	streamId: string;
	streamCode: string;
	alertsPerYear: number;
	coincidenceWindowS: number;
	t0: Date;
	shape: Shape | null;
};

type Citing = { alert: AlertRow; relation: Citation['relation'] };

/**
 * Decides which transient an alert belongs to: the one of its earlier serial, else of what it cites,
 * else of what already cites it, else the one it agrees with best (science: Budavári & Szalay 2008).
 */
export async function placeAlert(app: App, tx: Transaction, arrival: Arrival): Promise<Placement> {
	const { packet, streamId } = arrival;
	// A test neither joins, replaces nor retracts what is real, nor the other way round.
	const serials = arrival.serials.filter((row) => row.role === packet.role);
	const cited = (await citedAlerts(tx, packet.cites)).filter(
		({ alert }) => alert.role === packet.role
	);
	const citing = (await citingAlerts(tx, arrival.streamCode, packet.packetId)).filter(
		({ alert }) => alert.role === packet.role
	);

	const withdraws = ({ alert, relation }: Citing) =>
		relation !== 'followup' && alert.streamId === streamId;
	const overtaken = serials.some((row) => row.serial > packet.serial) || citing.some(withdraws);
	const withdrawn = [
		...serials.filter((row) => row.serial < packet.serial && row.live),
		...cited.filter((item) => withdraws(item) && item.alert.live).map(({ alert }) => alert)
	];
	const overreaches = cited.some((item) => item.relation !== 'followup' && !withdraws(item));
	const known = serials[0] ?? cited[0]?.alert ?? citing[0]?.alert;
	const live = packet.kind !== 'retraction' && !overtaken;
	if (known) {
		const logOdds = oddsOfTheSamePlace(withdrawn, arrival);
		return {
			transientId: known.transientId,
			membership: logOdds === null ? 'cited' : 'provisional',
			logOdds,
			withdrawn,
			live,
			overreaches
		};
	}
	const best = arrival.shape ? await bestMatch(app, tx, arrival, arrival.shape) : null;
	if (!best || best.logOdds < START_LOG_ODDS) {
		return {
			transientId: null,
			membership: 'started',
			logOdds: null,
			withdrawn,
			live,
			overreaches
		};
	}
	return {
		transientId: best.transientId,
		membership: best.logOdds > JOIN_LOG_ODDS ? 'joined' : 'provisional',
		logOdds: best.logOdds,
		withdrawn,
		live,
		overreaches
	};
}

/**
 * An update goes where its earlier version is, even when it is far from it; but when the two positions are
 * sooner of two sources than of one, a person should look. Null where they agree or can't be compared.
 */
function oddsOfTheSamePlace(replaced: AlertRow[], arrival: Arrival): number | null {
	const { shape } = arrival;
	if (shape?.kind !== 'circle') return null;
	const before = replaced.flatMap((row) => (row.shape?.kind === 'circle' ? [row.shape] : []));
	if (before.length === 0) return null;
	const best = Math.max(...before.map((earlier) => logBayesFactor([earlier, shape])));
	return best < 0 ? finite(best) : null;
}

async function bestMatch(
	app: App,
	tx: Transaction,
	arrival: Arrival,
	shape: Shape
): Promise<{ transientId: string; logOdds: number } | null> {
	const near = await nearbyTransients(
		tx,
		arrival.packet.role,
		arrival.t0,
		arrival.coincidenceWindowS
	);
	let best: { transientId: string; logOdds: number } | null = null;
	for (const { id } of near) {
		const parts = await liveParts(tx, id);
		if (parts.length === 0) continue;
		const shapes = parts.map((part) => part.shape);
		const logOdds = onlyCircles([...shapes, shape])
			? logOddsOfBelonging(parts, shape, arrival)
			: posterior(await app.compute.logBayesOfJoining({ parts: shapes, shape }), [arrival]);
		if (!best || logOdds > best.logOdds) best = { transientId: id, logOdds };
	}
	return best;
}

/**
 * Natural log of the posterior odds that `shape` has the same source as `parts`: the Bayes factor of
 * all together over that of the parts alone, times the prior odds from the rarer chance coincidence.
 */
export function logOddsOfBelonging(
	parts: LivePart[],
	shape: Shape,
	arrival: Pick<Arrival, 'alertsPerYear' | 'coincidenceWindowS'>
): number {
	const together = logBayesOfJoining(
		parts.map((part) => part.shape),
		shape
	);
	return posterior(together, [arrival]);
}

/** Natural log of the odds that all live parts come from one source; null with fewer than two. */
export function logOddsOfAgreement(parts: LivePart[]): number | null {
	if (parts.length < 2) return null;
	return posterior(logBayesFactor(parts.map((part) => part.shape)), parts.slice(1));
}

/** The same of any shapes: circles have a closed form, the others are meshed in a compute thread. */
export async function oddsOfAgreement(app: App, parts: LivePart[]): Promise<number | null> {
	const shapes = parts.map((part) => part.shape);
	if (parts.length < 2 || onlyCircles(shapes)) return logOddsOfAgreement(parts);
	return posterior(await app.compute.logBayesFactor(shapes), parts.slice(1));
}

const onlyCircles = (shapes: Shape[]) => shapes.every((shape) => shape.kind === 'circle');

/** ln of the posterior odds: the Bayes factor times the prior odds of each further alert. */
function posterior(
	logBayes: number,
	further: Pick<LivePart, 'alertsPerYear' | 'coincidenceWindowS'>[]
): number {
	return finite(further.reduce((sum, part) => sum + logPrior(part), logBayes));
}

function logPrior(source: Pick<LivePart, 'alertsPerYear' | 'coincidenceWindowS'>): number {
	return logPriorOdds({
		alertsPerYear: source.alertsPerYear,
		windowS: source.coincidenceWindowS
	});
}

/** Regions that do not overlap at all have odds of nought; JSON has no infinity to say so. */
function finite(logOdds: number): number {
	return Math.max(logOdds, -1e6);
}
