import { sveltekit } from '@sveltejs/kit/vite';
import tailwindcss from '@tailwindcss/vite';
import { defineConfig } from 'vitest/config';

export default defineConfig({
	plugins: [tailwindcss(), sveltekit()],
	build: { assetsInlineLimit: 0 },
	server: { host: '127.0.0.1' },
	test: {
		projects: [
			{
				extends: true,
				test: {
					name: 'unit',
					environment: 'node',
					include: [
						'src/**/*.test.ts',
						'fakes/**/*.test.ts',
						'scripts/**/*.test.ts',
						'tests/unit/**/*.test.ts',
						'tests/fuzz/**/*.test.ts'
					],
					exclude: ['**/*.db.test.ts']
				}
			},
			{
				extends: true,
				test: {
					name: 'db',
					environment: 'node',
					include: [
						'src/**/*.db.test.ts',
						'tests/http/**/*.test.ts',
						'tests/security/**/*.test.ts'
					],
					globalSetup: ['tests/database/globalSetup.ts'],
					testTimeout: 30_000,
					hookTimeout: 60_000,
					maxWorkers: 2
				}
			}
		]
	}
});
