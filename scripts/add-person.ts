import path from 'node:path';
import { parseArgs } from 'node:util';
import type { z } from 'zod';
import { connect } from '../db/client';
import { addPerson } from '../db/commands/person/add-person';
import { AppError } from '../db/errors';
import { addPersonInput, groupInput } from '../db/inputs/person';
import { getAppUrl } from '../db/setup/app-url';
import { readNewPassword } from './read-password';

const USAGE = `Makes an account. Motebook must be running (npm start).

  npm run add-person -- --login mira --email mira@lab.example --name "Mira Olsdal" --role researcher

  --login       login name; never changed later
  --email       e-mail address
  --name        name as it is printed
  --role        pi, researcher or guest
  --admin       also an administrator
  --group       name of the group, for the first account of an empty installation
  --time-zone   its time zone, such as Europe/Oslo (by default this machine's)

The password is asked for, or read as one line from standard input; it is never an option, because other users of the
machine can read those.`;

class UsageError extends Error {}

async function main(args: string[]): Promise<void> {
  const options = readOptions(args);
  if (options.help) return console.log(USAGE);
  const group = check(
    groupInput,
    {
      name: options.group ?? 'Our group',
      timeZone: options['time-zone'] ?? Intl.DateTimeFormat().resolvedOptions().timeZone,
    },
    { name: '--group', timeZone: '--time-zone' },
  );
  const { login, email, name, role, admin } = options;
  // What was typed as options is checked before anybody types a password.
  const person = check(addPersonInput.omit({ password: true }), { login, email, name, role, admin });
  const url = getAppUrl(path.resolve(import.meta.dirname, '..'));
  const input = check(addPersonInput, { ...person, password: await readNewPassword() });
  const db = connect(url, { max: 1, name: 'motebook-add-person' });
  try {
    await addPerson(db, input, group);
    console.log(`${input.name} can now sign in as ${input.login} or ${input.email}.`);
  } finally {
    await db.$client.end();
  }
}

function readOptions(args: string[]) {
  const text = { type: 'string' } as const;
  const flag = { type: 'boolean' } as const;
  try {
    return parseArgs({
      args,
      options: {
        ...{ login: text, email: text, name: text, role: text, group: text, 'time-zone': text },
        admin: { ...flag, default: false },
        help: flag,
      },
    }).values;
  } catch (error) {
    throw new UsageError((error as Error).message);
  }
}

/** @param labels - what the person at the terminal calls a field, where that is not simply its name as an option. */
function check<Shape extends z.ZodType>(
  shape: Shape,
  given: unknown,
  labels: Readonly<Record<string, string>> = { password: 'Password' },
): z.output<Shape> {
  const parsed = shape.safeParse(given);
  if (parsed.success) return parsed.data;
  const line = ({ path: [field], message }: z.core.$ZodIssue) =>
    `${labels[String(field)] ?? `--${String(field)}`}: ${message}`;
  throw new UsageError(parsed.error.issues.map(line).join('\n'));
}

/** What a person at the terminal should read about a fault. */
function sentences(error: unknown): string {
  if (error instanceof UsageError) return `${error.message}\n\nSee: npm run add-person -- --help`;
  if (error instanceof AppError) return Object.values(error.fields).join('\n') || error.sentence;
  for (let at = error; at instanceof Error; at = at.cause) {
    if ((at as NodeJS.ErrnoException).code === 'ECONNREFUSED') {
      return 'The database does not answer. Start Motebook first (npm start), then run this command beside it.';
    }
  }
  return error instanceof Error ? error.message : String(error);
}

main(process.argv.slice(2)).catch((error: unknown) => {
  console.error(sentences(error));
  process.exitCode = error instanceof UsageError ? 2 : 1;
});
