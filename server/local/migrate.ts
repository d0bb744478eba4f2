import { applyMigrations } from './migrations';

const url = process.env.DATABASE_URL;
if (!url) {
	process.stderr.write('DATABASE_URL is missing (see .env.example).\n');
	process.exit(1);
}
await applyMigrations(url);
