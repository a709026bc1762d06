import { Lab } from '../../src/lib/server/db/models/lab';

/** A lab with nothing in it. */
export async function makeLab(
  overrides: Readonly<Partial<{ name: string; isDemo: boolean }>> = {}
): Promise<Lab> {
  return Lab.create({ name: 'Weir House Laboratory', ...overrides });
}
