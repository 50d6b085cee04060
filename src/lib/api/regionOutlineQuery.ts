import { queryOptions } from '@tanstack/svelte-query';
import type { BoardTransient } from '../domain/board';
import type { RegionOutline } from '../domain/regionOutline';
import { queryKeys } from './queryKeys';
import { request } from './request';

const KEPT_MS = 30 * 60_000;
const RETRY_MS = 15_000;

/**
 * The joint region's outline, for a region that is no circle. A version never changes, so it is fetched
 * once; a fetch that failed is tried again while somebody looks.
 */
export function regionOutlineQuery({
	designation,
	region
}: Pick<BoardTransient, 'designation' | 'region'>) {
	const version = region?.version ?? 0;
	const wanted = region !== null && region.method !== 'closed';
	return queryOptions({
		queryKey: queryKeys.regionOutline(designation, version),
		queryFn: async ({ signal }) => {
			const path = `/api/v1/transients/${encodeURIComponent(designation)}/region?version=${version}`;
			const response = await request(path, { headers: { accept: 'application/json' }, signal });
			return (await response.json()) as RegionOutline;
		},
		...(wanted ? {} : { enabled: false }),
		staleTime: Infinity,
		gcTime: KEPT_MS,
		refetchInterval: ({ state }) => (state.status === 'error' ? RETRY_MS : false)
	});
}
