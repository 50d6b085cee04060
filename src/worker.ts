// Entry of the job process (built by vite.workers.config.ts): node build-workers/worker.js
import { startRuntime } from './lib/server/runtime';
import { logger } from './lib/server/logger';

process.env.DUSKLINE_ROLE ??= 'worker';
const runtime = await startRuntime();

async function leave(): Promise<void> {
	await runtime.stop();
	process.exit(0);
}
for (const signal of ['SIGTERM', 'SIGINT'] as const) {
	process.once(signal, () => {
		leave().catch((error: unknown) => {
			logger.error({ error: (error as Error).message }, 'could not stop cleanly');
			process.exit(1);
		});
	});
}
