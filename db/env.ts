import { z } from 'zod';

/**
 * The environment, read and checked in this one place.
 *
 * `readSettings` is what a person may set (see .env.example); the start command reads it. `env` is what a running
 * process (web, websocket server, projector, file fake) needs; the start command derives it in demo mode, an
 * administrator sets it in production. Faults are listed all at once, with the name and the remedy.
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
  MOTEBOOK_DATA: z.string().min(1).optional(),
  MOTEBOOK_DEMO: z.enum(['yes', 'no'], { error: 'must be yes or no' }).default('yes'),
});

const secret = z.string({ error: 'is missing' }).min(32, 'must have at least 32 characters');
const url = z.string({ error: 'is missing' }).min(1, 'is empty').refine(URL.canParse, 'must be an address (URL)');

const envShape = z
  .object({
    MOTEBOOK_MODE: z.enum(['demo', 'production'], { error: 'must be demo or production' }).default('demo'),
    MOTEBOOK_WS_PORT: port(4311),
    /** What the browser connects to for live editing, e.g. ws://127.0.0.1:4311 */
    MOTEBOOK_WS_URL: url,
    /** Origins of the file service: where browsers send uploads. */
    MOTEBOOK_FILES_ORIGIN: url,
    /** Folder for verified copies of files fetched from the file service. */
    MOTEBOOK_CACHE: z.string({ error: 'is missing' }).min(1, 'is empty'),
    MOTEBOOK_DATABASE_APP: url,
    MOTEBOOK_DATABASE_WS: url,
    NEXTAUTH_URL: url,
    NEXTAUTH_SECRET: secret,
    UPLOADTHING_TOKEN: z.string({ error: 'is missing' }).min(1, 'is empty'),
  })
  .superRefine((values, context) => {
    if (values.MOTEBOOK_MODE !== 'production') return;
    const origin = new URL(values.NEXTAUTH_URL);
    if (origin.protocol !== 'https:' && !isLoopback(origin.hostname)) {
      context.addIssue({ code: 'custom', path: ['NEXTAUTH_URL'], message: 'must be https outside loopback' });
    }
  });

export type Settings = z.infer<typeof settingsShape>;
export type Env = z.infer<typeof envShape>;

/** True for the names under which a machine reaches only itself. */
export function isLoopback(hostname: string): boolean {
  return hostname === 'localhost' || hostname === '[::1]' || hostname === '::1' || /^127(\.\d{1,3}){3}$/.test(hostname);
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

let cached: Env | null = null;

/** What a running process needs; checked on first use, because a build imports modules without any of it. */
export function env(): Env {
  cached ??= check(envShape, process.env);
  return cached;
}
