import { KilledImports, type Victim } from '../tests/integration/kills/killed-import';

/*
 * npm run kills [number]: brings files in on a PostgreSQL of its own and kills the server, one process of the database, the
 * whole database or the reading child at a moment drawn by lot, as many times as asked for. After each kill the database holds
 * all of the file or nothing of it, nothing hangs in the air, and the same file can be brought again. Ends with 1 at the first
 * round of which that is not so.
 */
const samples = 10;
const analytes = 20;
const victims: readonly Victim[] = [
  'server',
  'server',
  'database process',
  'database process',
  'database process',
  'reader',
  'database'
];

function requireThat(claim: boolean, what: string, seen: unknown): void {
  if (!claim) throw new Error(`${what}: ${JSON.stringify(seen)}`);
}

async function main(): Promise<void> {
  const rounds = Number(process.argv[2] ?? 100);
  if (!Number.isInteger(rounds) || rounds < 1) throw new Error('Say how many kills: npm run kills -- 1000');
  const study = await KilledImports.make(samples, analytes);
  const tally = new Map<string, number>();
  try {
    // How long a file takes undisturbed; kills fall into that span and a little beyond.
    let span = 0;
    for (let round = 1; round <= 3; round += 1) {
      const begun = performance.now();
      const { kind } = await study.bring(round, true);
      requireThat(kind === 'brought', 'an undisturbed file is stored', kind);
      span = performance.now() - begun;
    }
    for (let kill = 1; kill <= rounds; kill += 1) {
      const round = kill + 3;
      const victim = victims[Math.floor(Math.random() * victims.length)] ?? 'server';
      await study.killAfter(round, victim, Math.random() * span * 1.1);
      const found = await study.found(round);
      const came = found === null ? 'not received' : found.state;
      const expected = found?.state === 'stored' ? samples * analytes : 0;
      requireThat(
        found === null ||
          (found.measurements === expected && (expected > 0 || found.extracts + found.injections === 0)),
        `round ${round}, ${victim} killed: all of it or nothing`,
        found
      );
      requireThat((await study.orphans()).length === 0, `round ${round}: nothing hangs in the air`, victim);
      const again = await study.bring(round, true);
      requireThat(again.kind === 'brought', `round ${round}: it can be brought again`, again);
      const whole = await study.found(round);
      requireThat(
        whole?.state === 'stored' && JSON.stringify(whole.values) === JSON.stringify(study.valuesOf(round)),
        `round ${round}: every value as it was sent`,
        whole?.state
      );
      const line = `${victim} killed, then ${came}`;
      tally.set(line, (tally.get(line) ?? 0) + 1);
      if (kill % 25 === 0) console.log(`${kill} of ${rounds}`);
    }
  } finally {
    await study.stop();
  }
  for (const [line, count] of [...tally].sort()) console.log(`${String(count).padStart(6)}  ${line}`);
  console.log(`${rounds} kills: all or nothing each time, and every file could be brought again.`);
}

await main();
