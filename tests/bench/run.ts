import { existsSync } from 'node:fs';
import { fileURLToPath } from 'node:url';

/** One figure: its name, value and unit. */
export type BenchRow = [name: string, value: number, unit: string];

/** Modules of each suite; each exports an async function by default that returns its rows. */
const SUITES: Record<string, string[]> = {
	sky: ['skyRegions.ts', 'skyOutlook.ts'],
	eventloop: ['eventloop.ts'],
	ingest: ['ingest.ts', 'mapUpload.ts']
};

const wanted = process.argv.slice(2);
const names = wanted.length > 0 ? wanted : Object.keys(SUITES);
for (const name of names) {
	const files = SUITES[name];
	if (!files) {
		console.error(`No benchmark is called ${name}; there are ${Object.keys(SUITES).join(', ')}.`);
		process.exitCode = 2;
		continue;
	}
	for (const file of files) {
		const url = new URL(file, import.meta.url);
		if (!existsSync(fileURLToPath(url))) continue;
		const module = (await import(url.href)) as { default: () => Promise<BenchRow[]> };
		for (const [row, value, unit] of await module.default()) {
			console.log(`${row} ${Number(value.toPrecision(4))} ${unit}`);
		}
	}
	if (name === 'sky') {
		// Resident memory at its peak over the whole suite, the inputs' making included.
		console.log(`sky_rss_mb ${Math.round(process.resourceUsage().maxRSS / 1024)} MB`);
	}
}
