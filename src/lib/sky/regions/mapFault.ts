/** The fields of a map that can be wrong. */
export type MapField = 'uniq' | 'order' | 'nside' | 'density' | 'probability';

/** What is wrong with a map: the field, its entry where one is to blame, and what it must be. */
export class MapFault extends RangeError {
	constructor(
		readonly field: MapField,
		readonly entry: number | null,
		readonly detail: string
	) {
		super(`${field}${entry === null ? '' : `[${entry}]`} ${detail}`);
	}
}
