import { afterEach, expect, test, vi } from 'vitest';
import { readSettings } from '../../../db/env';
import type { Cluster } from '../../../db/setup/cluster';
import { demoPlan, productionPlan } from '../../../db/setup/plan';

const settings = readSettings({} as NodeJS.ProcessEnv);
const cluster = {
  url: (role: string) => `postgres://${role}`,
  secrets: { signIn: 'sign-in-secret', fileServiceKey: 'sk_local_key', fileServiceApp: 'app' },
} as unknown as Cluster;

afterEach(() => vi.unstubAllEnvs());

/** Which process is given a value that contains a text. */
function whoKnows(plans: ReturnType<typeof demoPlan>, text: string): string[] {
  return plans
    .filter((plan) => Object.values(plan.environment).some((value) => value.includes(text)))
    .map((plan) => plan.name);
}

test('in a demo each process is given what it needs and no more', () => {
  const plans = demoPlan(settings, cluster, '/data', false);
  expect(whoKnows(plans, 'motebook_owner')).toEqual([]);
  expect(whoKnows(plans, 'motebook_ws')).toEqual(['ws']);
  expect(whoKnows(plans, 'motebook_app')).toEqual(['mail', 'projector', 'web']);
  expect(whoKnows(plans, 'sign-in-secret')).toEqual(['ws', 'web']);
  const token = Buffer.from(JSON.stringify({ apiKey: 'sk_local_key' }))
    .toString('base64')
    .slice(0, 20);
  expect(whoKnows(plans, token)).toEqual(['files', 'projector', 'web']);
});

test('in a demo everything is on loopback, under one name for the pages and live editing', () => {
  for (const { name, environment } of demoPlan(settings, cluster, '/data', false)) {
    for (const value of Object.values(environment).filter((text) => /^(https?|wss?):/.test(text))) {
      expect(new URL(value).hostname, name).toBe('127.0.0.1');
    }
  }
});

test('in production each process is given its part of the environment', () => {
  const given = {
    MOTEBOOK_MODE: 'production',
    MOTEBOOK_DATABASE_OWNER: 'postgres://owner-secret',
    MOTEBOOK_DATABASE_APP: 'postgres://app-secret',
    MOTEBOOK_DATABASE_WS: 'postgres://ws-secret',
    NEXTAUTH_SECRET: 'sign-in-secret',
    UPLOADTHING_TOKEN: 'file-secret',
    MOTEBOOK_SMTP_URL: 'smtp://mail-secret',
    SOMETHING_ELSE: 'machine-secret',
  };
  for (const [name, value] of Object.entries(given)) vi.stubEnv(name, value);
  const plans = productionPlan(settings);
  expect(whoKnows(plans, 'owner-secret')).toEqual([]);
  expect(whoKnows(plans, 'machine-secret')).toEqual([]);
  expect(whoKnows(plans, 'ws-secret')).toEqual(['ws']);
  expect(whoKnows(plans, 'app-secret')).toEqual(['mail', 'projector', 'web']);
  expect(whoKnows(plans, 'mail-secret')).toEqual(['mail']);
  expect(whoKnows(plans, 'sign-in-secret')).not.toContain('mail');
  expect(whoKnows(plans, 'file-secret')).toEqual(['projector', 'web']);
  expect(plans.map((plan) => plan.name)).not.toContain('files');
});

test('Next, which reads .env by itself, finds the other roles’ addresses taken', () => {
  for (const plan of [...demoPlan(settings, cluster, '/data', true), ...productionPlan(settings)]) {
    if (plan.name !== 'web') continue;
    expect(plan.environment).toMatchObject({ MOTEBOOK_DATABASE_OWNER: '', MOTEBOOK_DATABASE_WS: '' });
  }
});
