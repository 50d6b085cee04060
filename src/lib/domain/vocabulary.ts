/** The product's closed lists of words, the same on screen, in the API, in the code and in the database. */

export const ROLES = ['duty', 'observer', 'pi', 'partner', 'steward'] as const;
export type Role = (typeof ROLES)[number];

export const ROLE_LABELS: Record<Role, string> = {
	duty: 'Duty scientist',
	observer: 'Observer',
	pi: 'PI',
	partner: 'Partner',
	steward: 'Steward'
};

export const STREAM_CLASSES = ['gamma', 'wideXray', 'narrowXray'] as const;
export type StreamClass = (typeof STREAM_CLASSES)[number];

export const STREAM_CLASS_LABELS: Record<StreamClass, string> = {
	gamma: 'Gamma-ray monitor',
	wideXray: 'Wide-field X-ray imager',
	narrowXray: 'Narrow-field X-ray telescope'
};

export const ALERT_ROLES = ['observation', 'test'] as const;
export type AlertRole = (typeof ALERT_ROLES)[number];

export const ALERT_KINDS = ['report', 'update', 'retraction'] as const;
export type AlertKind = (typeof ALERT_KINDS)[number];

export const ALERT_KIND_LABELS: Record<AlertKind, string> = {
	report: 'First report',
	update: 'Update of an earlier packet',
	retraction: 'Retraction of an earlier packet'
};

/** What became of a body as received; `refused` is the quarantine list, `noted` are packets that are no alerts. */
export const PACKET_STATES = [
	'received',
	'taken',
	'copy',
	'noted',
	'refused',
	'dismissed'
] as const;
export type PacketState = (typeof PACKET_STATES)[number];

/** The way a body came in. */
export const PACKET_CHANNELS = ['api', 'file', 'form', 'socket'] as const;
export type PacketChannel = (typeof PACKET_CHANNELS)[number];

export const PACKET_CHANNEL_LABELS: Record<PacketChannel, string> = {
	api: 'Posted with a key',
	file: 'Handed in as a file',
	form: 'Entered by hand',
	socket: 'Live socket'
};

/** How an earlier packet is cited (VOEvent 2.0, EventIVORN@cite). */
export const CITATION_RELATIONS = ['followup', 'supersedes', 'retraction'] as const;
export type CitationRelation = (typeof CITATION_RELATIONS)[number];

/** How an alert came to belong to its transient. */
export const MEMBERSHIPS = ['started', 'joined', 'provisional', 'cited', 'moved'] as const;
export type Membership = (typeof MEMBERSHIPS)[number];

export const TRANSIENT_STATES = ['open', 'closed', 'retracted'] as const;
export type TransientState = (typeof TRANSIENT_STATES)[number];

export const DECISIONS = ['chase', 'park', 'drop'] as const;
export type Decision = (typeof DECISIONS)[number];

export const DECISION_LABELS: Record<Decision, string> = {
	chase: 'Chase',
	park: 'Park',
	drop: 'Drop'
};

export const DECISION_MEANINGS: Record<Decision, string> = {
	chase: 'Get telescopes on it',
	park: 'Keep it but spend no time',
	drop: 'Not worth it'
};

export const SLOT_STATES = [
	'offered',
	'claimed',
	'on sky',
	'reported',
	'released',
	'lapsed'
] as const;
export type SlotState = (typeof SLOT_STATES)[number];

/** States in which a slot holds its telescope. */
export const HOLDING_SLOT_STATES = ['claimed', 'on sky', 'reported'] as const;

export const REPORT_KINDS = ['detection', 'limit', 'weather', 'technical'] as const;
export type ReportKind = (typeof REPORT_KINDS)[number];

export const REPORT_KIND_LABELS: Record<ReportKind, string> = {
	detection: 'Detection',
	limit: 'Upper limit',
	weather: 'Lost to weather',
	technical: 'Lost to a technical fault'
};

export const CHANNELS = ['email', 'push'] as const;
export type Channel = (typeof CHANNELS)[number];

export const DELIVERY_STATES = ['queued', 'sent', 'failed'] as const;
export type DeliveryState = (typeof DELIVERY_STATES)[number];

export const JOURNAL_KINDS = [
	'alertReceived',
	'alertRetracted',
	'alertRepeated',
	'regionChanged',
	'taken',
	'decided',
	'slotOffered',
	'slotClaimed',
	'slotReleased',
	'slotLapsed',
	'onSky',
	'reported',
	'reportWithdrawn',
	'circularPublished',
	'membershipConfirmed',
	'alertMoved',
	'split',
	'merged',
	'retracted',
	'closed',
	'reopened'
] as const;
export type JournalKind = (typeof JOURNAL_KINDS)[number];

export const THEMES = ['paper', 'night', 'dark-room'] as const;
export type Theme = (typeof THEMES)[number];

export const SAFETY_NOTE = 'The site’s own limits and its safety officer decide.';
