import type { App as ServerApp } from '$lib/server/app';
import type { Actor } from '$lib/server/actor';
import type { Theme } from '$lib/domain/vocabulary';

declare global {
	namespace App {
		interface Locals {
			/** The process's database, queue, clock and configuration. */
			app: ServerApp;
			/** Who is signed in; null for nobody. */
			actor: Actor | null;
			theme: Theme;
			requestId: string;
		}
		interface Error {
			message: string;
			requestId?: string;
		}
	}
}

export {};
