import {
  test,
  type Browser,
  type BrowserContext,
  type BrowserContextOptions,
  type Page
} from '@playwright/test';
import type { Role } from '../../src/lib/domain/roles';
import { signInByRequest } from './access-people';

type StorageState = Awaited<ReturnType<BrowserContext['storageState']>>;
const states = new Map<string, StorageState>();

/** A page on which somebody is signed in already; each signs in once for all tests of a file. */
export async function openAs(
  browser: Browser,
  who: Role | 'elsewhere',
  options: BrowserContextOptions = {}
): Promise<Page> {
  const known = states.get(who);
  const context = await browser.newContext({ ...options, ...(known ? { storageState: known } : {}) });
  if (!known) {
    await signInByRequest(context.request, who, test.info().project.use.baseURL ?? '');
    states.set(who, await context.storageState());
  }
  return context.newPage();
}
