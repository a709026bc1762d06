import { afterAll } from 'vitest';
import { closeDatabase } from '../../src/lib/server/db/sequelize';
import { onShutdown } from '../../src/lib/server/shutdown';
import { useOwnDatabase } from './database';

// Runs before the imports of each test file, so that DATABASE_URL already names the file's own database.
process.env.AUTH_SECRET ??= 'a-secret-that-guards-nothing-but-tests';
const database = await useOwnDatabase('empty');
onShutdown('database', 'connection pool', closeDatabase);

afterAll(() => database.drop());
