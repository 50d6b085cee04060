// Entry of the compute threads (built by vite.workers.config.ts, run by outlook/computePool.ts).
import { computeOutlook } from './lib/sky/outlook/computeOutlook';
import type { Outlook, OutlookInput } from './lib/sky/outlook/outlook';
import { jointRegion } from './lib/sky/regions/jointRegion';
import type { JointRegion } from './lib/sky/regions/jointRegion';
import type { Shape } from './lib/sky/regions/shape';

export function outlook(input: OutlookInput): Outlook {
	return computeOutlook(input);
}

export function joint(parts: Shape[]): JointRegion {
	return jointRegion(parts);
}
