import { eq, sql } from 'drizzle-orm';
import pg from 'pg';
import { connect, type Database } from '../client';
import type { DocumentNode } from '../commands/entry/document-json';
import { appendServerEdit } from '../commands/entry/write-document';
import { startEntry } from '../commands/entry/start-entry';
import { renameEntry } from '../commands/entry/rename-entry';
import { hashPassword } from '../commands/login/start-login';
import { BLOCK_DEFAULTS } from '../inputs/block-settings';
import type { Actor } from '../policies/may';
import { findActor } from '../queries/login/find-actor';
import { lab, login, notebook, notebookMember, person } from '../schema/index';
import { DEMO_LAB, DEMO_PASSWORD, demoEmail, demoNotebooks, demoPeople } from './demo-accounts';
import { demoEntries } from './demo-entries';
import type { DemoBlock, DemoEntry } from './demo-plan';
import { DemoVisitor } from './demo-visitor';

export interface DemoContext {
  /** Where the running product answers. */
  readonly origin: string;
  readonly ownerUrl: string;
  readonly appUrl: string;
  readonly say: (line: string) => void;
}

/**
 * Fills an empty installation with the invented group and its entries, through the running product: files are uploaded,
 * read and analysed as anybody's would be. Only the database's clock is shifted, so that entries lie on different days.
 * @returns whether the installation shows the demo (filled now or earlier).
 */
export async function fillDemoIfEmpty(context: DemoContext): Promise<boolean> {
  const db = connect(context.appUrl, { max: 2, name: 'motebook-demo' });
  try {
    const people = await db.select({ login: person.login }).from(person);
    if (people.length > 0) return people.some((one) => one.login === demoPeople[0]?.login);
    context.say('Filling the demo …');
    await makeGroup(db);
    for (const one of demoEntries()) {
      await atDay(context.ownerUrl, one.daysAgo, () => makeEntry(db, context.origin, one));
    }
    return true;
  } finally {
    await db.$client.end();
  }
}

async function makeGroup(db: Database): Promise<void> {
  const passwordHash = await hashPassword(DEMO_PASSWORD);
  await db.transaction(async (tx) => {
    await tx.insert(lab).values(DEMO_LAB);
    const rows = await tx
      .insert(person)
      .values(
        demoPeople.map(({ login: name, name: printed, role, admin }) => ({
          login: name,
          email: demoEmail(name),
          name: printed,
          role,
          admin,
          passwordHash,
        })),
      )
      .returning({ id: person.id, login: person.login });
    const id = (name: string) => rows.find((row) => row.login === name)?.id ?? '';
    for (const { code, title, description, members } of demoNotebooks) {
      const [made] = await tx
        .insert(notebook)
        .values({ code, title, description, createdBy: id('marenko') })
        .returning({ id: notebook.id });
      if (!made) throw new Error(`notebook ${code} was not made`);
      await tx
        .insert(notebookMember)
        .values(
          Object.entries(members).map(([name, role]) => ({ notebookId: made.id, personId: id(name), role })),
        );
    }
  });
}

/** Runs something with the database's clock set back; the clock is set right again even when it fails. */
async function atDay(ownerUrl: string, daysAgo: number, run: () => Promise<void>): Promise<void> {
  const owner = new pg.Client({ connectionString: ownerUrl });
  await owner.connect();
  try {
    await owner.query('INSERT INTO clock_offset (shift) VALUES (make_interval(days => $1))', [-daysAgo]);
    await run();
  } finally {
    await owner.query('DELETE FROM clock_offset');
    await owner.end();
  }
}

async function makeEntry(db: Database, origin: string, plan: DemoEntry): Promise<void> {
  const visitor = await DemoVisitor.signIn(origin, plan.author, DEMO_PASSWORD);
  const actor = await newestActor(db, plan.author);
  const [where] = await db.select({ id: notebook.id }).from(notebook).where(eq(notebook.code, plan.notebook));
  const { entryId } = await startEntry(db, actor, { notebookId: where?.id ?? '' });
  await renameEntry(db, actor, { entryId, title: plan.title });
  const append: DocumentNode[] = [];
  for (const part of plan.parts) {
    if (typeof part === 'string') append.push(paragraph(part));
    else append.push(await makeBlock(visitor, entryId, part));
  }
  await db.transaction((tx) => appendServerEdit(tx, { entryId, actor, append }));
  await visitor.signOut();
}

/** Uploads a block's file, confirms how it is read, and gives the node that shows it. */
async function makeBlock(visitor: DemoVisitor, entryId: string, plan: DemoBlock) {
  const { attachmentId } = await visitor.upload(entryId, plan.file.name, plan.file.text);
  const { readingId } = await confirmReading(visitor, attachmentId, plan);
  return {
    type: 'diffusionBlock',
    attrs: {
      ...BLOCK_DEFAULTS,
      ...plan.settings,
      blockId: crypto.randomUUID(),
      readingIds: [readingId],
      caption: plan.caption,
    },
  };
}

const paragraph = (text: string) => ({ type: 'paragraph', content: [{ type: 'text', text }] });

/** The login that the visitor has just made: edits carry it, as a browser's would. */
async function newestActor(db: Database, name: string): Promise<Actor> {
  const [row] = await db
    .select({ id: login.id })
    .from(login)
    .innerJoin(person, sql`${person.id} = ${login.personId}`)
    .where(sql`${person.login} = ${name}`)
    .orderBy(sql`${login.startedAt} DESC`)
    .limit(1);
  const actor = row && (await findActor(db, row.id));
  if (!actor) throw new Error(`${name} is not signed in`);
  return actor;
}

/** Asks intake what it understood, adds what the file does not say, and confirms. */
async function confirmReading(
  visitor: DemoVisitor,
  attachmentId: string,
  plan: DemoBlock,
): Promise<{ readingId: string }> {
  const answer = (await visitor.json(`/api/attachments/${attachmentId}/intake`, {})) as {
    inspection: { spec: Record<string, unknown> };
  };
  const { frameInterval, pixelSize, exposureFraction } = plan.stated;
  const spec = {
    ...answer.inspection.spec,
    ...(frameInterval && { frameInterval }),
    ...(pixelSize && { pixelSize }),
    ...(exposureFraction && { exposure: { fraction: exposureFraction } }),
  };
  return (await visitor.json(`/api/attachments/${attachmentId}/readings`, { spec })) as { readingId: string };
}
