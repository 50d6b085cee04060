import { pathToFileURL } from 'node:url';

/** Whether this module is the file the process was started with. */
export function isMain(moduleUrl: string): boolean {
	return process.argv[1] !== undefined && moduleUrl === pathToFileURL(process.argv[1]).href;
}

/** A port number from the environment, refused with the variable's name when it is not one. */
export function portFrom(variable: string): number {
	const port = Number(process.env[variable]);
	if (!Number.isInteger(port) || port < 1 || port > 65_535) {
		throw new Error(`${variable} must be a port number`);
	}
	return port;
}

/** Closes what the process serves on the first signal, then ends it with code 0. */
export function closeOnSignal(close: () => Promise<void>): void {
	for (const signal of ['SIGINT', 'SIGTERM', 'SIGHUP'] as const) {
		process.once(signal, () => {
			void close().finally(() => process.exit(0));
		});
	}
}
