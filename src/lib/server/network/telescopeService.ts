import { and, asc, eq, gt, inArray, isNull, sql } from 'drizzle-orm';
import type {
	ClosureView,
	TelescopeDetail,
	TelescopeInput,
	TelescopeOverview
} from '../../domain/telescope';
import type { PersonRef } from '../../domain/board';
import type { Detector } from '../../sky/visibility/telescope';
import { requirePermission, type Actor } from '../actor';
import type { App } from '../app';
import { databaseErrorOf, type Executor, type Transaction } from '../db/database';
import { closure, telescope, telescopeObserver } from '../db/schema/network';
import { person } from '../db/schema/people';
import { slot } from '../db/schema/slots';
import { writeTransaction } from '../db/writeTransaction';
import { DomainError } from '../domainError';
import { refreshOutlooksJob } from '../outlook/refreshOutlooksJob';

export type TelescopeRow = typeof telescope.$inferSelect;

/** Every telescope, those in service first, from west to east. */
export async function listTelescopes(app: App, actor: Actor | null): Promise<TelescopeOverview[]> {
	requirePermission(actor, 'viewNetwork');
	const rows = await app.database
		.select()
		.from(telescope)
		.orderBy(sql`${telescope.retiredAt} is not null`, asc(telescope.lonDeg));
	const observers = await observersOf(app.database);
	const closures = await closuresFrom(app.database, app.now());
	return rows.map((row) => overviewOf(row, observers, closures, app.now()));
}

/** One telescope with every limit, its closures to come and who works with it. */
export async function telescopeDetail(
	app: App,
	actor: Actor | null,
	code: string
): Promise<TelescopeDetail> {
	requirePermission(actor, 'viewNetwork');
	const row = await requireTelescope(app.database, code);
	const observers = await observersOf(app.database, row.id);
	const closures = await closuresFrom(app.database, app.now(), row.id);
	const { apertureM, latDeg, lonDeg, heightM, limits, detectors, depths } = row;
	return {
		...overviewOf(row, observers, closures, app.now()),
		settings: {
			code: row.code,
			name: row.name,
			site: row.site,
			apertureM,
			latDeg,
			lonDeg,
			heightM,
			limits,
			detectors,
			depths,
			exposureS: row.exposureS,
			overheadS: row.overheadS,
			maxTiles: row.maxTiles,
			observerIds: observers.map(({ id }) => id)
		},
		closures: closures.map(({ view }) => view),
		updatedAt: row.updatedAt.toISOString()
	};
}

/** People who can work with a telescope. */
export async function observerCandidates(app: App, actor: Actor | null): Promise<PersonRef[]> {
	requirePermission(actor, 'viewNetwork');
	return app.database
		.select({ id: person.id, name: person.name, initials: person.initials })
		.from(person)
		.where(and(sql`'observer' = any(${person.roles})`, isNull(person.disabledAt)))
		.orderBy(person.name);
}

/** Adds a telescope; the open transients' outlooks are computed anew with it. */
export async function createTelescope(
	app: App,
	actor: Actor | null,
	input: TelescopeInput
): Promise<{ code: string }> {
	requirePermission(actor, 'editTelescopes');
	return codeFree(input.code, () =>
		writeTransaction(app, async (tx, change) => {
			const [row] = await tx
				.insert(telescope)
				.values({ ...columnsOf(input), updatedAt: app.now() })
				.returning({ id: telescope.id });
			await assignObservers(tx, row!.id, input.observerIds);
			change.touchNetwork();
			await askForOutlooks(app, tx, `${input.code} was added`);
			return { code: input.code };
		})
	);
}

/** Changes a telescope; the open transients' outlooks are computed anew. Claims stand. */
export async function editTelescope(
	app: App,
	actor: Actor | null,
	code: string,
	input: TelescopeInput
): Promise<{ code: string }> {
	requirePermission(actor, 'editTelescopes');
	return codeFree(input.code, () =>
		writeTransaction(app, async (tx, change) => {
			const row = await requireTelescope(tx, code);
			await tx
				.update(telescope)
				.set({ ...columnsOf(input), updatedAt: app.now() })
				.where(eq(telescope.id, row.id));
			await assignObservers(tx, row.id, input.observerIds);
			change.touchNetwork();
			await askForOutlooks(app, tx, `${input.code} was changed`);
			return { code: input.code };
		})
	);
}

/** Takes a telescope out of service, or back into it; not while somebody holds a claim to come. */
export async function retireTelescope(
	app: App,
	actor: Actor | null,
	code: string,
	retired: boolean
): Promise<void> {
	requirePermission(actor, 'editTelescopes');
	await writeTransaction(app, async (tx, change) => {
		const row = await requireTelescope(tx, code);
		if ((row.retiredAt !== null) === retired) return;
		if (retired) await requireNoClaims(tx, row, app.now());
		await tx
			.update(telescope)
			.set({ retiredAt: retired ? app.now() : null, updatedAt: app.now() })
			.where(eq(telescope.id, row.id));
		change.touchNetwork();
		await askForOutlooks(app, tx, `${code} was ${retired ? 'retired' : 'put into service'}`);
	});
}

export async function requireTelescope(executor: Executor, code: string): Promise<TelescopeRow> {
	const [row] = await executor.select().from(telescope).where(eq(telescope.code, code));
	if (!row) throw new DomainError('notFound', `There is no telescope ${code}.`);
	return row;
}

export async function askForOutlooks(app: App, tx: Transaction, reason: string): Promise<void> {
	await app.queue.enqueue(tx, refreshOutlooksJob, { reason });
}

async function requireNoClaims(tx: Transaction, row: TelescopeRow, now: Date): Promise<void> {
	const [held] = await tx
		.select({ name: person.name })
		.from(slot)
		.innerJoin(person, eq(person.id, slot.claimedBy))
		.where(
			and(
				eq(slot.telescopeId, row.id),
				inArray(slot.state, ['claimed', 'on sky']),
				gt(sql`upper(${slot.during})`, now.toISOString())
			)
		)
		.limit(1);
	if (held) {
		throw new DomainError(
			'wrongState',
			`${held.name} holds a claim on ${row.name}. Release it first.`
		);
	}
}

async function codeFree<T>(code: string, body: () => Promise<T>): Promise<T> {
	try {
		return await body();
	} catch (error) {
		if (databaseErrorOf(error)?.constraint !== 'telescope_code_unique') throw error;
		const detail = `Another telescope has the code ${code}.`;
		throw new DomainError('nameTaken', detail, [{ pointer: '/code', detail }]);
	}
}

async function assignObservers(tx: Transaction, telescopeId: string, ids: string[]): Promise<void> {
	const wanted = [...new Set(ids)];
	if (wanted.length > 0) {
		const fit = await tx
			.select({ id: person.id })
			.from(person)
			.where(and(inArray(person.id, wanted), sql`'observer' = any(${person.roles})`));
		if (fit.length < wanted.length) {
			const detail = 'Somebody chosen is not an observer.';
			throw new DomainError('invalid', detail, [{ pointer: '/observerIds', detail }]);
		}
	}
	await tx.delete(telescopeObserver).where(eq(telescopeObserver.telescopeId, telescopeId));
	if (wanted.length > 0) {
		await tx
			.insert(telescopeObserver)
			.values(wanted.map((personId) => ({ telescopeId, personId })));
	}
}

function columnsOf(input: TelescopeInput) {
	const { observerIds: _observerIds, sunConfirmed: _sunConfirmed, ...columns } = input;
	return columns;
}

type Observer = PersonRef & { telescopeId: string };

async function observersOf(executor: Executor, telescopeId?: string): Promise<Observer[]> {
	return executor
		.select({
			telescopeId: telescopeObserver.telescopeId,
			id: person.id,
			name: person.name,
			initials: person.initials
		})
		.from(telescopeObserver)
		.innerJoin(person, eq(person.id, telescopeObserver.personId))
		.where(
			and(
				isNull(person.disabledAt),
				telescopeId ? eq(telescopeObserver.telescopeId, telescopeId) : undefined
			)
		)
		.orderBy(person.name);
}

type StoredClosure = { telescopeId: string; view: ClosureView };

async function closuresFrom(
	executor: Executor,
	from: Date,
	telescopeId?: string
): Promise<StoredClosure[]> {
	const rows = await executor
		.select({ closure, enteredBy: person.name })
		.from(closure)
		.leftJoin(person, eq(person.id, closure.enteredBy))
		.where(
			and(
				gt(sql`upper(${closure.during})`, from.toISOString()),
				telescopeId ? eq(closure.telescopeId, telescopeId) : undefined
			)
		)
		.orderBy(sql`lower(${closure.during})`);
	return rows.map(({ closure: row, enteredBy }) => ({
		telescopeId: row.telescopeId,
		view: {
			id: row.id,
			startAt: row.during.start.toISOString(),
			endAt: row.during.end.toISOString(),
			reason: row.reason,
			enteredBy
		}
	}));
}

function overviewOf(
	row: TelescopeRow,
	observers: Observer[],
	closures: StoredClosure[],
	now: Date
): TelescopeOverview {
	const depth = row.depths[0]!;
	const next = closures.find(({ telescopeId }) => telescopeId === row.id)?.view ?? null;
	return {
		code: row.code,
		name: row.name,
		site: row.site,
		apertureM: row.apertureM,
		latDeg: row.latDeg,
		lonDeg: row.lonDeg,
		minAltDeg: row.limits.minAltDeg,
		sunAltMaxDeg: row.limits.sunAltMaxDeg,
		filters: row.depths.map(({ filter }) => filter),
		fieldDeg2: row.detectors.reduce((sum, detector) => sum + areaDeg2(detector), 0),
		depth: {
			filter: depth.filter,
			refLimitMag: depth.refLimitMag,
			refExposureS: depth.refExposureS
		},
		observers: observers
			.filter(({ telescopeId }) => telescopeId === row.id)
			.map(({ id, name, initials }) => ({ id, name, initials })),
		closure: next,
		closedNow: next !== null && new Date(next.startAt) <= now,
		retired: row.retiredAt !== null
	};
}

function areaDeg2(detector: Detector): number {
	return detector.shape === 'circle'
		? Math.PI * detector.radiusDeg ** 2
		: detector.widthDeg * detector.heightDeg;
}
