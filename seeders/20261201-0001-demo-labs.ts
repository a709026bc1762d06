import { User } from '../src/lib/server/db/models/user';
import { inTransaction } from '../src/lib/server/db/transaction';
import { demoAccounts, demoLabName, secondLabName } from './demo-accounts';
import { createDemoLab } from './demo/labs';
import { seedSecondLab } from './demo/second-lab';
import { seedLargeStudy } from './demo/seed-large-study';
import { seedLowLevelStudy } from './demo/seed-low-level-study';
import { seedDemoStudy } from './demo/study';

/** The two demo labs with their people and invented studies: all of it or nothing, so that an interrupted start can begin anew. */
export async function up(): Promise<void> {
  await inTransaction(null, {}, async () => {
    const [first] = demoAccounts;
    if (first && (await User.count({ where: { email: first.email } })) > 0) return;
    const lab = await createDemoLab(demoLabName);
    await seedDemoStudy(lab);
    await seedLowLevelStudy(lab);
    await seedLargeStudy(lab);
    await seedSecondLab(await createDemoLab(secondLabName));
  });
}
