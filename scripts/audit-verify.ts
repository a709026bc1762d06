import { ConfigurationError } from '../src/lib/server/config';
import { verifyChain } from '../src/lib/server/db/audit-verify';
import { Lab } from '../src/lib/server/db/models/lab';
import { closeDatabase } from '../src/lib/server/db/sequelize';

/** Walks the audit chain of every lab and names the first broken link of each. Ends with 1 when there is one. */
async function main(): Promise<number> {
  const labs = await Lab.findAll({ order: [['createdAt', 'ASC']] });
  let broken = 0;
  for (const lab of labs) {
    const report = await verifyChain(lab.id);
    if (report.broken) {
      broken += 1;
      console.error(`${lab.name}: broken after ${report.verified} events. ${report.broken.sentence}`);
    } else {
      console.log(`${lab.name}: ${report.verified} events, every link holds. Last hash ${report.lastHash}`);
    }
  }
  if (labs.length === 0) console.log('There is no lab yet.');
  return broken > 0 ? 1 : 0;
}

try {
  process.exitCode = await main();
} catch (error) {
  if (!(error instanceof ConfigurationError)) throw error;
  console.error(error.message);
  process.exitCode = 1;
} finally {
  await closeDatabase();
}
