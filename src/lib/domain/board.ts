import type { Equatorial } from '../sky/angle';
import type { FadeModel, Strip } from '../sky/outlook/outlook';
import type { JointRegion } from '../sky/regions/jointRegion';
import type { Shape } from '../sky/regions/shape';
import type { Depth, Detector, LimitName, TelescopeLimits } from '../sky/visibility/telescope';
import type {
	Decision,
	Membership,
	ReportKind,
	SlotState,
	StreamClass,
	TransientState
} from './vocabulary';

/** Instants are ISO 8601 UTC strings; angles degrees, ICRS; shares and chances 0 to 1. */

export type PersonRef = { id: string; name: string; initials: string };

export type BoardPart = {
	alertId: string;
	packetId: string;
	streamCode: string;
	streamName: string;
	streamClass: StreamClass;
	receivedAt: string;
	membership: Membership;
	/** Natural log of the odds that it belongs. */
	logOdds: number | null;
	shape: Shape;
};

export type BoardRegion = {
	version: number;
	method: JointRegion['method'];
	centre: Equatorial;
	sigmaDeg: number | null;
	area50Deg2: number;
	area90Deg2: number;
	equivalentRadiusDeg: number;
	/** Natural log of the odds of one source; null with fewer than two live alerts. */
	logOddsAgreement: number | null;
	/** 90 % area of the version before this one; null for the first. */
	before: { area90Deg2: number; cause: string } | null;
	/** Reports of nothing that it takes into account, and the chance that the source is too faint for them. */
	searched: { reports: number; tooFaintChance: number } | null;
};

export type BoardWindow = {
	startAt: string;
	endAt: string;
	opensBy: LimitName;
	endsBy: LimitName;
};

export type BoardTile = {
	centre: Equatorial;
	rotationDeg: number;
	startAt: string;
	exposureS: number;
	probability: number;
	detectChance: number;
};

export type BoardOutlookRow = {
	telescopeCode: string;
	catch: number;
	reach: number;
	opensAt: string | null;
	windows: BoardWindow[];
	/** In words, why it can't observe; null when it can. */
	whyNot: string | null;
	/** The same in numbers: the limit, the degrees that are missing at best, and when that is. */
	forbidden: { limit: LimitName; missingDeg: number | null; at: string | null } | null;
	atOpening: {
		altDeg: number;
		azDeg: number;
		airmass: number;
		moonDistanceDeg: number;
		moonAltDeg: number;
		moonIlluminated: number;
		sunDistanceDeg: number;
		limitMag: number;
	} | null;
	tiles: BoardTile[];
	strip: Strip;
};

export type BoardOutlook = {
	computedAt: string;
	regionVersion: number;
	networkCatch: number;
	costOfWaitingPoints: number;
	/** The fade assumed, and the stream whose class it comes from; null without a live alert. */
	fade: (FadeModel & { streamName: string }) | null;
	/** Telescope codes in the order that adds most catch. */
	order: string[];
	rows: BoardOutlookRow[];
};

export type BoardSlot = {
	id: string;
	telescopeCode: string;
	startAt: string;
	endAt: string;
	state: SlotState;
	filter: string;
	exposureS: number;
	catch: number;
	claimedBy: PersonRef | null;
	claimedAt: string | null;
};

export type BoardReport = {
	id: string;
	telescopeCode: string | null;
	telescopeName: string | null;
	kind: ReportKind;
	filter: string | null;
	observedAt: string;
	magnitude: number | null;
	magnitudeError: number | null;
	limitMag: number | null;
	remarks: string;
	reportedBy: PersonRef;
};

export type BoardTransient = {
	designation: string;
	revision: number;
	state: TransientState;
	isTest: boolean;
	isDrill: boolean;
	t0: string;
	firstReceivedAt: string;
	/** Plain words: "1.2 deg² from 2 circles and 1 X-ray position". */
	headline: string;
	taken: { by: PersonRef; at: string } | null;
	decision: { decision: Decision; by: PersonRef; at: string; reason: string } | null;
	parts: BoardPart[];
	region: BoardRegion | null;
	outlook: BoardOutlook | null;
	slots: BoardSlot[];
	reports: BoardReport[];
};

export type BoardTelescope = {
	code: string;
	name: string;
	site: string;
	apertureM: number;
	latDeg: number;
	lonDeg: number;
	minAltDeg: number;
	sunDistanceDeg: number;
	filters: string[];
	exposureS: number;
	/** The limits besides `minAltDeg` and `sunDistanceDeg`; of a horizon mask only that there is one. */
	limits: Omit<TelescopeLimits, 'minAltDeg' | 'sunDistanceDeg' | 'horizon'> & {
		hasHorizon: boolean;
	};
	/** Of the filter that the outlook assumes. */
	depth: Depth;
	overheadS: number;
	detectors: Detector[];
	/** Slots that hold it, for whichever transient, from now on. */
	holds: (BoardSlot & { designation: string })[];
	/** Closed by the site now. */
	closed: { until: string; reason: string } | null;
};

export type BoardWatch = {
	first: PersonRef;
	second: PersonRef | null;
	startAt: string;
	endAt: string;
	next: PersonRef | null;
};

/** Answer of `GET /api/v1/board`. With `since`, `transients` holds only those changed after it. */
export type Board = {
	revision: number;
	serverNow: string;
	/** All open transients, costliest wait first. */
	openDesignations: string[];
	transients: BoardTransient[];
	telescopes: BoardTelescope[];
	watch: BoardWatch | null;
};

/** What the signed-in person may do, for screens; the server checks again. */
export type Viewer = {
	id: string;
	name: string;
	initials: string;
	email: string;
	roles: import('./vocabulary').Role[];
	/** Telescopes they work with. */
	telescopeCodes: string[];
};
