import { skySearchSchema } from '$lib/domain/skySearch';
import { requirePermission } from '$lib/server/actor';
import { answer } from '$lib/server/http/api';
import { parseInput } from '$lib/server/http/problem';
import { transientsTouching } from '$lib/server/transients/skySearch';
import type { RequestHandler } from './$types';

/** Transients whose joint region touches a patch: `?ra=&dec=&radius=` ICRS degrees, `&credible=` 50 or 90. */
export const GET: RequestHandler = ({ locals, url }) =>
	answer(async () => {
		requirePermission(locals.actor, 'viewTransients');
		const { ra, dec, radius, credible } = parseInput(
			skySearchSchema,
			Object.fromEntries(url.searchParams)
		);
		const patch = { raDeg: ra, decDeg: dec, radiusDeg: radius, credible };
		return { transients: await transientsTouching(locals.app, locals.actor, patch) };
	});
