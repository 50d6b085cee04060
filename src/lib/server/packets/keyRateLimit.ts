import { RateLimiterMemory, RateLimiterRes } from 'rate-limiter-flexible';
import { DomainError } from '../domainError';

/** Packets a key may send in ten seconds to one process: far above any real stream, below what hurts others. */
const PACKETS = 5000;
const SECONDS = 10;

const limiter = new RateLimiterMemory({ points: PACKETS, duration: SECONDS });

/** Counts one packet of a key; throws `tooManyRequests` with the seconds to wait once it sends too fast. */
export async function limitKey(keyId: string): Promise<void> {
	try {
		await limiter.consume(keyId);
	} catch (error) {
		if (!(error instanceof RateLimiterRes)) throw error;
		const retryAfterS = Math.max(1, Math.ceil(error.msBeforeNext / 1000));
		throw new DomainError(
			'tooManyRequests',
			`This key may send ${PACKETS} packets in ${SECONDS} s. Wait ${retryAfterS} s.`,
			[],
			{ retryAfterS }
		);
	}
}
