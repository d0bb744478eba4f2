import { applyMigrations } from './migrations';

const { DATABASE_URL: url, APPLICATION_ROLE: role } = process.env;
if (!url) {
	process.stderr.write(
		'DATABASE_URL is missing: the address with the role that owns the tables.\n',
	);
	process.exit(1);
}
await applyMigrations(url, role);
