import { createSubscriber } from 'svelte/reactivity';

/**
 * The server's clock, ticking once a second while something on the page reads it.
 * A phone's own clock can be minutes off, and the time since T0 must not be.
 */
class ServerClock {
	#offsetMs = $state(0);
	#tick = createSubscriber((update) => {
		const timer = setInterval(update, 1000);
		return () => clearInterval(timer);
	});

	/** The server's time now, UTC milliseconds; reading it in an effect or markup follows the clock. */
	get nowMs(): number {
		this.#tick();
		return Date.now() + this.#offsetMs;
	}

	/** An instant of the browser's clock on the server's. */
	fromBrowser(browserMs: number): number {
		return browserMs + this.#offsetMs;
	}

	/** Sets the clock by an answer of the server. Differences below 1.5 s are the network's. */
	sync(serverNow: string): void {
		if (typeof window === 'undefined') return;
		const offsetMs = Date.parse(serverNow) - Date.now();
		if (!Number.isFinite(offsetMs)) return;
		const wanted = Math.abs(offsetMs) < 1500 ? 0 : offsetMs;
		if (Math.abs(wanted - this.#offsetMs) > 1500) this.#offsetMs = wanted;
	}
}

export const serverClock = new ServerClock();
