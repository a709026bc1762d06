import { randomBytes } from 'node:crypto';
import type { TestProject } from 'vitest/node';
import { dropDatabase, createMigratedDatabase, type TemplateNames } from './database';

declare module 'vitest' {
  interface ProvidedContext {
    /** Address of the server whose databases the tests make and drop. */
    serverUrl: string;
    templates: TemplateNames;
  }
}

/**
 * Once before all integration tests: a server (the one in DATABASE_URL, else one of their own) and a migrated template.
 * In a server of somebody else's only databases named headwater_test_… are made, and dropped again.
 */
export async function setup(project: TestProject): Promise<() => Promise<void>> {
  const given = process.env.DATABASE_URL;
  const { startThrowawayPostgres } = await import('../../scripts/setup/throwaway-postgres.mjs');
  const own = given ? null : await startThrowawayPostgres();
  const serverUrl = given ?? own!.url;
  const run = `headwater_test_${process.pid}_${randomBytes(3).toString('hex')}`;
  const templates: TemplateNames = { run, empty: `${run}_empty`, demo: `${run}_demo` };
  const end = async () => {
    if (own) return own.stop();
    await dropDatabase(serverUrl, templates.empty);
    await dropDatabase(serverUrl, templates.demo);
  };
  try {
    await createMigratedDatabase(serverUrl, templates.empty, { demo: false });
  } catch (error) {
    await end();
    throw error;
  }
  project.provide('serverUrl', serverUrl);
  project.provide('templates', templates);
  return end;
}
