import { sql } from 'drizzle-orm';
import { afterAll, afterEach, beforeAll, describe, expect, test, vi } from 'vitest';
import { hashPassword } from '../../../db/commands/login/start-login';
import type { Actor } from '../../../db/policies/may';
import { createTestDatabase, type TestDatabase } from '../../helpers/database';
import { makeLab, makeLogin, makePerson } from '../../helpers/factories';

/** Only the cookie and the request's headers are replaced; who may what is asked of the database as always. */
const session = vi.hoisted(() => ({ loginId: null as string | null }));
const request = vi.hoisted(() => ({ forwarded: '192.0.2.1' }));
vi.mock('server-only', () => ({}));
vi.mock('next/cache', () => ({ revalidatePath: () => undefined }));
vi.mock('next/headers', () => ({
  headers: async () => new Headers({ 'x-forwarded-for': request.forwarded }),
}));
vi.mock('next-auth', async (original) => ({
  ...(await original<object>()),
  getServerSession: async () => session,
}));

const URL_HERE = 'http://127.0.0.1:4310';
const PASSWORD = 'slow brown motes in water';
let database: TestDatabase;
let admin: Actor;
let researcher: Actor;
const logged = vi.spyOn(console, 'error').mockImplementation(() => undefined);

beforeAll(async () => {
  database = await createTestDatabase();
  Object.assign(process.env, {
    MOTEBOOK_DATABASE_APP: database.urls.motebook_app,
    MOTEBOOK_WS_URL: 'ws://127.0.0.1:4311',
    MOTEBOOK_FILES_ORIGIN: 'http://127.0.0.1:4312',
    MOTEBOOK_CACHE: '.cache',
    NEXTAUTH_URL: URL_HERE,
    NEXTAUTH_SECRET: 'only for this test, 32 characters',
    UPLOADTHING_TOKEN: 'none',
  });
  await makeLab(database.app);
  const passwordHash = await hashPassword(PASSWORD);
  admin = await makePerson(database.app, { admin: true, passwordHash });
  researcher = await makePerson(database.app, { login: 'sigrun', passwordHash });
});
afterAll(async () => {
  await globalThis.motebookDatabase?.$client.end();
  await database.drop();
});
afterEach(() => {
  session.loginId = null;
  expect(logged).not.toHaveBeenCalled();
});

type AnyAction = (input: never) => Promise<{ ok: boolean; refusal?: { code: string; fields: object } }>;

describe('every action about people', () => {
  const NOBODY = '00000000-0000-4000-8000-000000000000';
  const invitation = { login: 'new', email: 'new@lab.example', name: 'New', role: 'researcher' };
  /** Name, what is right, what is not, and whether only an administrator may. */
  const cases: [string, Record<string, unknown>, Record<string, unknown>, boolean][] = [
    ['inviteAction', invitation, { ...invitation, email: 'nowhere' }, true],
    ['sendLinkAction', { personId: NOBODY }, { personId: 'x' }, true],
    [
      'changeRoleAction',
      { personId: NOBODY, role: 'pi', admin: false },
      { personId: NOBODY, role: 'boss', admin: false },
      true,
    ],
    ['deactivateAction', { personId: NOBODY }, { personId: NOBODY, reason: 'x'.repeat(501) }, true],
    ['reactivateAction', { personId: NOBODY }, {}, true],
    ['handOverAction', { personId: NOBODY, toPersonId: NOBODY }, { personId: NOBODY, toPersonId: '' }, true],
    ['endPersonsLoginAction', { loginId: NOBODY }, { loginId: 1 }, false],
    ['changeNameAction', { name: 'Sigrun' }, { name: 'Sig\u202erun' }, false],
    ['changeEmailAction', { email: 'a@lab.example', current: 'x' }, { email: 'a', current: 'x' }, false],
    [
      'changePasswordAction',
      { current: 'x', password: 'x'.repeat(15) },
      { current: 'x', password: 'short' },
      false,
    ],
    ['endLoginAction', { loginId: NOBODY }, {}, false],
    ['endOtherLoginsAction', {}, { of: 'all' }, false],
  ];

  async function load(name: string): Promise<AnyAction> {
    const all = {
      ...(await import('../../../app/(main)/people/actions')),
      ...(await import('../../../app/(main)/profile/actions')),
    };
    return all[name as keyof typeof all] as unknown as AnyAction;
  }

  test.each(cases)('%s asks for a sign-in, refuses bad input by field', async (name, right, wrong) => {
    const act = await load(name);
    expect(await act(right as never)).toMatchObject({ ok: false, refusal: { code: 'not-signed-in' } });
    session.loginId = admin.loginId;
    const refused = await act(wrong as never);
    expect(refused).toMatchObject({ ok: false, refusal: { code: 'bad-input' } });
    expect(Object.keys(refused.refusal?.fields ?? {}).length).toBeGreaterThan(0);
  });

  test.each(cases.filter(([, , , keeps]) => keeps))('%s is not for a researcher', async (name, right) => {
    session.loginId = researcher.loginId;
    expect(await (await load(name))(right as never)).toMatchObject({
      ok: false,
      refusal: { code: 'forbidden' },
    });
  });

  test('an administrator invites, and everybody changes their own name', async () => {
    session.loginId = admin.loginId;
    expect(await (await load('inviteAction'))(invitation as never)).toMatchObject({ ok: true });
    session.loginId = researcher.loginId;
    expect(await (await load('changeNameAction'))({ name: 'Sigrun' } as never)).toMatchObject({ ok: true });
  });

  test('one’s own other logins can be ended, those of others are not there', async () => {
    const second = await makeLogin(database.app, researcher.personId);
    session.loginId = researcher.loginId;
    const end = await load('endLoginAction');
    expect(await end({ loginId: admin.loginId } as never)).toMatchObject({ refusal: { code: 'not-found' } });
    expect(await end({ loginId: second } as never)).toMatchObject({ ok: true });
  });
});

describe('what people do before they are signed in', () => {
  test('asking for a reset answers the same for a name that somebody has and one that nobody has (S08)', async () => {
    const { askResetAction } = await import('../../../app/(auth)/actions');
    request.forwarded = '10.0.0.1, 192.0.2.7';
    const known = await askResetAction({ name: 'sigrun' });
    const unknown = await askResetAction({ name: 'nobody.here' });
    expect(known).toEqual(unknown);
    expect(known.ok).toBe(true);
    // The address that counts is the nearest proxy's word, not what the client put before it.
    request.forwarded = '10.9.9.9, 192.0.2.7';
    expect((await askResetAction({ name: 'third' })).ok).toBe(true);
    expect(await askResetAction({ name: 'fourth' })).toMatchObject({ refusal: { code: 'slow-down' } });
    request.forwarded = '192.0.2.8';
    expect((await askResetAction({ name: 'fourth' })).ok).toBe(true);
    expect(await askResetAction({ name: ' ' })).toMatchObject({ refusal: { code: 'bad-input' } });
  });

  test('a link that is unknown, and one that is cut short, are told apart from a short password', async () => {
    const { setPasswordAction } = await import('../../../app/(auth)/actions');
    const password = 'x9 plain words here';
    const secret = 'a'.repeat(43);
    expect(await setPasswordAction({ secret, password })).toMatchObject({ refusal: { code: 'not-found' } });
    expect(await setPasswordAction({ secret: 'a', password })).toMatchObject({
      refusal: { fields: { secret: expect.stringContaining('not complete') } },
    });
    expect(await setPasswordAction({ secret, password: 'short' })).toMatchObject({
      refusal: { fields: { password: expect.stringContaining('15 characters') } },
    });
  });
});

describe('the route that signs in', () => {
  const load = () => import('../../../app/_server/count-sign-in');
  /** Stands where next-auth's handler does: right for one password, as that answers. */
  async function post(name: string, right: boolean, options: { json?: boolean; from?: string } = {}) {
    const wrapped = (await load()).countSignIn(async (given) => {
      const body = await given.text();
      expect(body).toContain(name);
      return right
        ? new Response('{}', {
            headers: { 'Set-Cookie': 'motebook-session=token; Path=/; HttpOnly' },
          })
        : new Response('{}', { status: 401 });
    });
    return wrapped(
      new Request(`${URL_HERE}/api/auth/callback/credentials`, {
        method: 'POST',
        headers: {
          'Content-Type': options.json ? 'application/json' : 'application/x-www-form-urlencoded',
          'x-forwarded-for': options.from ?? '198.51.100.9',
        },
        body: options.json ? JSON.stringify({ name }) : new URLSearchParams({ name }),
      }),
      {},
    );
  }

  test('from the sixth wrong password it answers 429 with Retry-After and a sentence, form or JSON (S07)', async () => {
    for (let i = 0; i < 5; i++)
      expect((await post('guessed', false, { json: i % 2 === 0, from: `198.51.100.${i}` })).status).toBe(401);
    const stopped = await post('guessed', true, { from: '198.51.100.77' });
    expect(stopped.status).toBe(429);
    expect(stopped.headers.getSetCookie()).toEqual([]);
    const wait = Number(stopped.headers.get('retry-after'));
    expect(wait).toBeGreaterThan(500);
    expect(wait).toBeLessThanOrEqual(600);
    const body = (await stopped.json()) as { sentence: string; code: string; url: string };
    expect(body.code).toBe('slow-down');
    expect(body.sentence).toBe('Too many attempts. Wait 10 minutes and try again.');
    // This is where next-auth's client looks for what to say.
    expect(new URL(body.url).searchParams.get('error')).toBe(body.sentence);
  });

  test('right passwords are not counted, and begin the count anew', async () => {
    for (let i = 0; i < 15; i++) expect((await post('often', true)).status).toBe(200);
    for (let i = 0; i < 4; i++) expect((await post('often', false)).status).toBe(401);
    expect((await post('often', true)).status).toBe(200);
    for (let i = 0; i < 5; i++) expect((await post('often', false)).status).toBe(401);
  });

  test('other requests to next-auth are not counted', async () => {
    const { rows: before } = await database.app.execute(sql`SELECT sum(count) AS n FROM attempt`);
    const wrapped = (await load()).countSignIn(async () => new Response('{}'));
    for (const path of ['csrf', 'session', 'signout'])
      await wrapped(new Request(`${URL_HERE}/api/auth/${path}`, { method: 'POST' }), {});
    await wrapped(new Request(`${URL_HERE}/api/auth/callback/credentials`), {});
    const { rows: after } = await database.app.execute(sql`SELECT sum(count) AS n FROM attempt`);
    expect(after).toEqual(before);
  });
});
