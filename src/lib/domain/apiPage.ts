/** One field of a body, an answer or an address, in words. */
export type ApiField = {
	/** With its parents, as `shape.centre.raDeg`. */
	name: string;
	type: string;
	unit: string | null;
	needed: boolean;
	says: string | null;
};

/** Fields that belong together: a body's own, or those of one variant. */
export type ApiFields = { caption: string | null; says: string | null; fields: ApiField[] };

export type ApiBody = {
	mediaType: string;
	says: string | null;
	groups: ApiFields[];
	examples: { name: string; text: string }[];
};

export type ApiAnswer = { status: string; says: string; bodies: ApiBody[] };

export type ApiOperation = {
	id: string;
	method: string;
	path: string;
	summary: string;
	who: string;
	parameters: ApiField[];
	bodies: ApiBody[];
	answers: ApiAnswer[];
};

/** The description of the API as its page shows it. */
export type ApiPage = {
	nouns: { name: string; id: string; operations: ApiOperation[] }[];
	problems: { code: string; status: number; title: string }[];
};
