import { fileURLToPath } from 'node:url';
import { defineConfig } from 'vite';

// A second build for what runs outside the web process: `worker` (the job process) and `compute`
// (the piscina thread). Vite's `?worker` imports do not work for Node threads.
export default defineConfig({
	resolve: { alias: { $lib: fileURLToPath(new URL('./src/lib', import.meta.url)) } },
	build: {
		ssr: true,
		outDir: 'build-workers',
		target: 'node20',
		rollupOptions: {
			input: {
				worker: 'src/worker.ts',
				compute: 'src/compute.ts'
			},
			output: { format: 'esm', entryFileNames: '[name].js' }
		}
	}
});
