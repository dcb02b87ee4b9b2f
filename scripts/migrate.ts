import { migrateDatabase, migrationsFolderOf } from '@/db/migrate';
import { databaseEnv } from '@/lib/env/database';

// Started from the repository's folder: a bundle does not know where its sources lie.
await migrateDatabase(databaseEnv().databaseUrl, migrationsFolderOf(process.cwd()));
