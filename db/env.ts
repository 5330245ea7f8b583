import { z } from 'zod';

/**
 * The environment, read and checked in this one place.
 *
 * `readSettings` is what a person may set (see .env.example); the start command reads it. `env`, `wsEnv` and
 * `projectorEnv` are what the running processes need; the start command derives them in demo mode, an administrator
 * sets them in production. Faults are listed all at once, with the name and the remedy.
 */

const port = (byDefault: number) =>
  z.coerce
    .number({ error: 'must be a port number' })
    .int('must be a whole number')
    .min(1024, 'must be 1024 or more')
    .max(65535, 'must be 65535 or less')
    .default(byDefault);

const settingsShape = z.object({
  MOTEBOOK_MODE: z.enum(['demo', 'production'], { error: 'must be demo or production' }).default('demo'),
  MOTEBOOK_PORT: port(4310),
  MOTEBOOK_WS_PORT: port(4311),
  MOTEBOOK_FILES_PORT: port(4312),
  MOTEBOOK_DB_PORT: port(4313),
  MOTEBOOK_SMTP_PORT: port(4314),
  MOTEBOOK_DATA: z.string().min(1).optional(),
  MOTEBOOK_DEMO: z.enum(['yes', 'no'], { error: 'must be yes or no' }).default('yes'),
});

const secret = z.string({ error: 'is missing' }).min(32, 'must have at least 32 characters');
const url = z
  .string({ error: 'is missing' })
  .min(1, 'is empty')
  .refine(URL.canParse, 'must be an address (URL)');

const publicUrl = { NEXTAUTH_URL: url, NEXTAUTH_SECRET: secret };
const database = z
  .string({ error: 'is missing' })
  .regex(/^postgres(ql)?:\/\//, 'must start with postgres://');
const mode = z.enum(['demo', 'production'], { error: 'must be demo or production' }).default('demo');
const fileStore = {
  /** Names and keys of the hosted file service, as its SDK wants them. */
  UPLOADTHING_TOKEN: z.string({ error: 'is missing' }).min(1, 'is empty'),
  /** Folder for verified copies of files fetched from the file service. */
  MOTEBOOK_CACHE: z.string({ error: 'is missing' }).min(1, 'is empty'),
};

/** Each process is given, and checks, only what it needs. */
const webShape = z.object({
  MOTEBOOK_MODE: mode,
  /** What the browser connects to for live editing, e.g. ws://127.0.0.1:4311 */
  MOTEBOOK_WS_URL: url,
  /** Origin of the file service: where browsers send uploads. */
  MOTEBOOK_FILES_ORIGIN: url,
  MOTEBOOK_DATABASE_APP: database,
  /** Where the demo's mail server keeps what it gets; the page /mail shows it. Not set in production. */
  MOTEBOOK_MAIL_FOLDER: z.string().min(1).optional(),
  ...publicUrl,
  ...fileStore,
});
const wsShape = z.object({
  MOTEBOOK_MODE: mode,
  MOTEBOOK_WS_PORT: port(4311),
  MOTEBOOK_DATABASE_WS: database,
  ...publicUrl,
});
const projectorShape = z.object({ MOTEBOOK_MODE: mode, MOTEBOOK_DATABASE_APP: database, ...fileStore });
const mailShape = z.object({
  MOTEBOOK_MODE: mode,
  MOTEBOOK_DATABASE_APP: database,
  NEXTAUTH_URL: url,
  /** The mail server, with its password if it wants one. */
  MOTEBOOK_SMTP_URL: z
    .string({ error: 'is missing' })
    .regex(/^smtps?:\/\/./, 'must start with smtp:// or smtps://')
    .refine(URL.canParse, 'must be an address (URL)'),
  /** Sender of all mail. */
  MOTEBOOK_MAIL_FROM: z
    .string({ error: 'is missing' })
    .regex(/^[^\r\n]*[^\s@<]+@[^\s@>]+>?$/, 'must be an address, such as Motebook <motebook@lab.example>'),
});

export type Settings = z.infer<typeof settingsShape>;
export type WebEnv = z.infer<typeof webShape>;
export type WsEnv = z.infer<typeof wsShape>;
export type ProjectorEnv = z.infer<typeof projectorShape>;
export type MailEnv = z.infer<typeof mailShape>;

/** True for the names under which a machine reaches only itself. */
export function isLoopback(hostname: string): boolean {
  return (
    hostname === 'localhost' ||
    hostname === '[::1]' ||
    hostname === '::1' ||
    /^127(\.\d{1,3}){3}$/.test(hostname)
  );
}

function check<T>(shape: z.ZodType<T>, values: NodeJS.ProcessEnv): T {
  // An empty value in an .env file means "not set".
  const given = Object.fromEntries(Object.entries(values).filter(([, value]) => value !== ''));
  const parsed = shape.safeParse(given);
  if (parsed.success) return parsed.data;
  const faults = parsed.error.issues.map((issue) => `  ${issue.path.join('.')} ${issue.message}`);
  throw new Error(`The environment is not right (see .env.example):\n${faults.join('\n')}`);
}

/** What a person may set. @throws Error listing every fault. */
export function readSettings(values: NodeJS.ProcessEnv = process.env): Settings {
  return check(settingsShape, values);
}

/** Reads on first use, because a build imports modules without any environment; then always the same answer. */
function once<T>(read: () => T): () => T {
  let cached: { value: T } | null = null;
  return () => (cached ??= { value: read() }).value;
}

/** In production the cookie must never travel in the open; a demo, whose passwords are printed, stays on its machine. */
function checkPublicUrl(mode: string, address: string): void {
  const { protocol, hostname } = new URL(address);
  if (isLoopback(hostname)) return;
  const fault =
    mode === 'demo'
      ? 'must be on loopback in demo mode; for others, set MOTEBOOK_MODE=production'
      : protocol !== 'https:' && 'must be https outside loopback';
  if (fault) throw new Error(`The environment is not right (see .env.example):\n  NEXTAUTH_URL ${fault}`);
}

/** Environment of the web process. @throws Error listing every fault. */
export const env = once((): WebEnv => {
  const values = check(webShape, process.env);
  checkPublicUrl(values.MOTEBOOK_MODE, values.NEXTAUTH_URL);
  return values;
});

/** Environment of the websocket server. @throws Error listing every fault. */
export const wsEnv = once((): WsEnv => {
  const values = check(wsShape, process.env);
  checkPublicUrl(values.MOTEBOOK_MODE, values.NEXTAUTH_URL);
  return values;
});

/** Environment of the projector. @throws Error listing every fault. */
export const projectorEnv = once((): ProjectorEnv => check(projectorShape, process.env));

/** Environment of the mail process. @throws Error listing every fault. */
export const mailEnv = once((): MailEnv => {
  const values = check(mailShape, process.env);
  checkPublicUrl(values.MOTEBOOK_MODE, values.NEXTAUTH_URL);
  return values;
});
