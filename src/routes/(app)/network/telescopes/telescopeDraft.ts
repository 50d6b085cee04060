import type { TelescopeDetail } from '$lib/domain/telescope';

/** What a box holds while it is edited: a stored number, or whatever was typed. */
export type Box = string | number | null;

export type HorizonDraft = { azDeg: Box; altDeg: Box };
export type DetectorDraft = {
	shape: 'rectangle' | 'circle';
	widthDeg: Box;
	heightDeg: Box;
	rotationDeg: Box;
	radiusDeg: Box;
	offsetXDeg: Box;
	offsetYDeg: Box;
};
export type DepthDraft = {
	filter: Box;
	refLimitMag: Box;
	refExposureS: Box;
	floorMag: Box;
	extinctionMag: Box;
	darkSkyMag: Box;
};
export type LimitsDraft = {
	sunAltMaxDeg: Box;
	minAltDeg: Box;
	maxAltDeg: Box;
	hourAngleMaxH: Box;
	decMinDeg: Box;
	decMaxDeg: Box;
	moonDistanceDeg: Box;
	sunDistanceDeg: Box;
	horizon: HorizonDraft[] | null;
};

/** A telescope as its form holds it. */
export type TelescopeDraft = {
	code: Box;
	name: Box;
	site: Box;
	apertureM: Box;
	latDeg: Box;
	lonDeg: Box;
	heightM: Box;
	limits: LimitsDraft;
	detectors: DetectorDraft[];
	depths: DepthDraft[];
	exposureS: Box;
	overheadS: Box;
	maxTiles: Box;
	observerIds: string[];
};

export const BLANK_DEPTH: DepthDraft = {
	filter: '',
	refLimitMag: '',
	refExposureS: '',
	floorMag: '',
	extinctionMag: '',
	darkSkyMag: ''
};

/** Holds the boxes of both shapes, so that the shape can be changed back and forth. */
export const BLANK_DETECTOR: DetectorDraft = {
	shape: 'rectangle',
	widthDeg: '',
	heightDeg: '',
	rotationDeg: 0,
	radiusDeg: '',
	offsetXDeg: 0,
	offsetYDeg: 0
};

/** A telescope nobody has described yet, with the usual limits filled in (common practice, no source). */
export const NEW_TELESCOPE: TelescopeDraft = {
	code: '',
	name: '',
	site: '',
	apertureM: '',
	latDeg: '',
	lonDeg: '',
	heightM: '',
	limits: {
		sunAltMaxDeg: -12,
		minAltDeg: 20,
		maxAltDeg: null,
		hourAngleMaxH: null,
		decMinDeg: null,
		decMaxDeg: null,
		moonDistanceDeg: 25,
		sunDistanceDeg: 45,
		horizon: null
	},
	detectors: [{ ...BLANK_DETECTOR }],
	depths: [{ ...BLANK_DEPTH, refExposureS: 60 }],
	exposureS: 120,
	overheadS: 20,
	maxTiles: 24,
	observerIds: []
};

/** The form's start: what was sent and refused, else what is stored. */
export function draftOf(
	stored: TelescopeDetail['settings'] | TelescopeDraft,
	sent: Record<string, unknown> | undefined
): TelescopeDraft {
	const base = structuredClone(stored) as TelescopeDraft;
	const typed: Partial<TelescopeDraft> = sent && 'limits' in sent ? sent : {};
	const isTyped = typed.limits !== undefined;
	const { detectors, depths } = isTyped ? { detectors: [], depths: [], ...typed } : base;
	return {
		...base,
		...typed,
		limits: isTyped ? { ...base.limits, horizon: null, ...typed.limits } : base.limits,
		detectors: detectors.map((detector) => ({ ...BLANK_DETECTOR, ...detector })),
		depths: depths.map((depth) => ({ ...BLANK_DEPTH, ...depth })),
		// An unticked box is not sent at all.
		observerIds: (isTyped ? typed.observerIds : base.observerIds) ?? []
	};
}

/** A box's number, or null while it holds none. */
export function numberIn(box: Box): number | null {
	if (box === null || box === '') return null;
	const value = Number(box);
	return Number.isFinite(value) ? value : null;
}
