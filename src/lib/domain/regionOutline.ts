import { z } from 'zod';
import type { Equatorial } from '../sky/angle';

/** Closed rings around a region's pieces and holes, as `mocOutline` makes them; ICRS. */
export type Rings = Equatorial[][];

/** Answer of `GET /api/v1/transients/[designation]/region`: one version of a joint region, to draw. */
export type RegionOutline = {
	version: number;
	/** Of the areas that hold 50 % and 90 % of the probability. */
	outline50: Rings;
	outline90: Rings;
};

/** What that address takes. */
export const regionVersionSchema = z.strictObject({
	version: z
		.string()
		.regex(/^[1-9]\d{0,8}$/, 'Must be a whole number from 1.')
		.transform(Number)
		.optional()
});
