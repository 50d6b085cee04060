import { defineConfig } from 'drizzle-kit';

export default defineConfig({
	dialect: 'postgresql',
	schema: './src/lib/server/db/schema/*.ts',
	out: './drizzle',
	dbCredentials: { url: process.env.DATABASE_URL ?? 'postgres://duskline@127.0.0.1:54329/duskline' }
});
