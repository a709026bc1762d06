import { parseArgs } from 'node:util';
import { stockLibrary } from '../seeders/library/stock-library';
import { emailAddress, labNameForm, personName } from '../src/lib/schemas/people';
import { hashPassword } from '../src/lib/server/auth/passwords';
import { createToken } from '../src/lib/server/auth/tokens';
import { config } from '../src/lib/server/config';
import { Lab } from '../src/lib/server/db/models/lab';
import { Membership } from '../src/lib/server/db/models/membership';
import { PasswordReset } from '../src/lib/server/db/models/password-reset';
import { User } from '../src/lib/server/db/models/user';
import { closeDatabase } from '../src/lib/server/db/sequelize';
import { audit, inTransaction } from '../src/lib/server/db/transaction';

/*
 * npm run lab:create -- --lab "Name of the lab" --manager "Name" --email name@lab.example
 *
 * Creates an empty lab with its copy of the library and one manager. Prints a link, good for a day, with which the
 * manager sets a password; an account that exists already keeps its own.
 */
const linkHours = 24;

interface Wanted {
  readonly lab: string;
  readonly manager: string;
  readonly email: string;
}

function readArguments(): Wanted {
  const { values } = parseArgs({
    options: { lab: { type: 'string' }, manager: { type: 'string' }, email: { type: 'string' } }
  });
  const lab = labNameForm.safeParse({ name: values.lab });
  const manager = personName.safeParse(values.manager);
  const email = emailAddress.safeParse(values.email);
  const problems = [
    lab.success ? null : `--lab: ${lab.error.issues[0]?.message}`,
    manager.success ? null : `--manager: ${manager.error.issues[0]?.message}`,
    email.success ? null : `--email: ${email.error.issues[0]?.message}`
  ].filter((problem) => problem !== null);
  if (!lab.success || !manager.success || !email.success) throw new Error(problems.join('\n'));
  return { lab: lab.data.name, manager: manager.data, email: email.data };
}

/** The account of the address: the one there is, or a new one that no password opens yet, with a link to set one. */
async function accountOf({ manager, email }: Wanted): Promise<{ user: User; secret: string | null }> {
  const known = await User.findOne({ where: { email } });
  if (known) return { user: known, secret: null };
  const user = await User.create({
    email,
    name: manager,
    passwordHash: await hashPassword(createToken().secret)
  });
  const token = createToken();
  await PasswordReset.create({
    userId: user.id,
    tokenHash: token.hash,
    expiresAt: new Date(Date.now() + linkHours * 3_600_000),
    usedAt: null
  });
  return { user, secret: token.secret };
}

async function createLab(wanted: Wanted): Promise<string | null> {
  return inTransaction(null, {}, async () => {
    const { user, secret } = await accountOf(wanted);
    const lab = await Lab.create({ name: wanted.lab, isDemo: false });
    await Membership.create({ labId: lab.id, userId: user.id, role: 'manager' });
    const actor = {
      userId: user.id,
      name: user.name,
      email: user.email,
      role: 'manager' as const,
      labId: lab.id,
      labName: lab.name,
      labIsDemo: false
    };
    await inTransaction(actor, {}, async () => {
      audit({
        action: 'created',
        entity: 'lab',
        entityId: lab.id,
        sentence: `The lab ${lab.name} was made, with ${user.name} as its manager.`,
        after: { name: lab.name, manager: user.name }
      });
      await stockLibrary(actor);
    });
    return secret;
  });
}

try {
  const wanted = readArguments();
  const secret = await createLab(wanted);
  console.log(`${wanted.lab} is there, with ${wanted.email} as its manager.`);
  if (secret === null) {
    console.log(
      'That address has an account already: sign in with its password and choose the lab in the menu at the name.'
    );
  } else {
    const { origin, host, port } = config();
    const at = origin ?? `http://${host === '0.0.0.0' || host === '::' ? '127.0.0.1' : host}:${port}`;
    console.log(`Within ${linkHours} hours a password can be set at\n  ${at}/reset-password/${secret}`);
  }
} catch (error) {
  console.error(error instanceof Error ? error.message : error);
  process.exitCode = 1;
} finally {
  await closeDatabase();
}
