import path from 'node:path';
import type { Settings } from '../env';
import type { ChildPlan } from './children';
import type { Cluster } from './cluster';

/** Addresses of a demo installation. Never "localhost" beside "127.0.0.1": cookies belong to one name only. */
export function addresses(settings: Settings) {
  return {
    product: `http://127.0.0.1:${settings.MOTEBOOK_PORT}`,
    ws: `ws://127.0.0.1:${settings.MOTEBOOK_WS_PORT}`,
    files: `http://127.0.0.1:${settings.MOTEBOOK_FILES_PORT}`,
  };
}

/** Next reads .env by itself; what is set, even to nothing, it leaves alone. The web process needs none of these. */
const WITHHELD = { MOTEBOOK_DATABASE_OWNER: '', MOTEBOOK_DATABASE_WS: '', MOTEBOOK_SMTP_URL: '' };

/** The processes of a demo installation, each with the environment that it needs and no more. */
export function demoPlan(settings: Settings, cluster: Cluster, folder: string, dev: boolean): ChildPlan[] {
  const at = addresses(settings);
  const { secrets } = cluster;
  const fileService = {
    UPLOADTHING_TOKEN: Buffer.from(
      JSON.stringify({
        apiKey: secrets.fileServiceKey,
        appId: secrets.fileServiceApp,
        regions: ['local'],
        ingestHost: 'localhost',
      }),
    ).toString('base64'),
    UPLOADTHING_INGEST_URL: at.files,
    UPLOADTHING_API_URL: at.files,
    // The SDK speaks plain http only to a host whose name says "local".
    UPLOADTHING_UFS_HOST: `localhost:${settings.MOTEBOOK_FILES_PORT}`,
    UPLOADTHING_UFS_APP_ID_LOCATION: 'path',
    UPLOADTHING_IS_DEV: 'false',
    UPLOADTHING_LOG_LEVEL: 'Warning',
  };
  const common = { MOTEBOOK_MODE: 'demo', NEXT_TELEMETRY_DISABLED: '1', TZ: 'UTC' };
  const signIn = { NEXTAUTH_URL: at.product, NEXTAUTH_SECRET: secrets.signIn };
  const cache = { MOTEBOOK_CACHE: path.join(folder, 'cache') };
  const mailFolder = { MOTEBOOK_MAIL_FOLDER: path.join(folder, 'mail') };
  return [
    {
      name: 'files',
      args: ['--import', 'tsx', 'app/_server/fakes/file-service-main.ts'],
      environment: {
        ...common,
        ...fileService,
        MOTEBOOK_FILES_PORT: String(settings.MOTEBOOK_FILES_PORT),
        MOTEBOOK_FILES_FOLDER: path.join(folder, 'files'),
      },
    },
    {
      name: 'smtp',
      args: ['--import', 'tsx', 'app/_server/fakes/mail-service-main.ts'],
      environment: {
        ...common,
        ...mailFolder,
        MOTEBOOK_SMTP_PORT: String(settings.MOTEBOOK_SMTP_PORT),
      },
    },
    {
      name: 'mail',
      args: ['--import', 'tsx', 'ws-server/mail/main.ts'],
      environment: {
        ...common,
        NEXTAUTH_URL: at.product,
        MOTEBOOK_DATABASE_APP: cluster.url('motebook_app'),
        MOTEBOOK_SMTP_URL: `smtp://127.0.0.1:${settings.MOTEBOOK_SMTP_PORT}`,
        MOTEBOOK_MAIL_FROM: 'Motebook <motebook@tarnfield.example>',
      },
    },
    {
      name: 'projector',
      args: ['--import', 'tsx', 'ws-server/projector/main.ts'],
      environment: {
        ...common,
        ...fileService,
        ...cache,
        MOTEBOOK_DATABASE_APP: cluster.url('motebook_app'),
      },
    },
    {
      name: 'ws',
      args: ['--import', 'tsx', 'ws-server/main.ts'],
      environment: {
        ...common,
        ...signIn,
        MOTEBOOK_WS_PORT: String(settings.MOTEBOOK_WS_PORT),
        MOTEBOOK_DATABASE_WS: cluster.url('motebook_ws'),
      },
    },
    {
      name: 'web',
      args: [
        'node_modules/next/dist/bin/next',
        dev ? 'dev' : 'start',
        '-H',
        '127.0.0.1',
        '-p',
        String(settings.MOTEBOOK_PORT),
      ],
      environment: {
        ...common,
        ...signIn,
        ...fileService,
        ...cache,
        ...mailFolder,
        ...WITHHELD,
        NODE_ENV: dev ? 'development' : 'production',
        MOTEBOOK_WS_URL: at.ws,
        MOTEBOOK_FILES_ORIGIN: at.files,
        MOTEBOOK_DATABASE_APP: cluster.url('motebook_app'),
      },
    },
  ];
}

/** The same processes in production, where an administrator sets the environment and runs the services. */
export function productionPlan(settings: Settings): ChildPlan[] {
  const given = Object.fromEntries(
    Object.entries(process.env).flatMap(([name, value]) =>
      value !== undefined && /^(MOTEBOOK_|NEXTAUTH_|UPLOADTHING_|TZ$)/.test(name) ? [[name, value]] : [],
    ),
  );
  const { MOTEBOOK_DATABASE_OWNER: _owner, ...shared } = given;
  const { MOTEBOOK_DATABASE_WS: _ws, MOTEBOOK_SMTP_URL: smtp, ...withoutWs } = shared;
  const forWs = Object.fromEntries(
    Object.entries(shared).filter(
      ([name]) =>
        !['MOTEBOOK_DATABASE_APP', 'MOTEBOOK_SMTP_URL'].includes(name) && !name.startsWith('UPLOADTHING_'),
    ),
  );
  const production = { NODE_ENV: 'production', NEXT_TELEMETRY_DISABLED: '1' };
  const forMail = Object.fromEntries(
    Object.entries(withoutWs).filter(
      ([name]) => name !== 'NEXTAUTH_SECRET' && !name.startsWith('UPLOADTHING_'),
    ),
  );
  return [
    {
      name: 'mail',
      args: ['--import', 'tsx', 'ws-server/mail/main.ts'],
      environment: { ...forMail, ...(smtp ? { MOTEBOOK_SMTP_URL: smtp } : {}), ...production },
    },
    {
      name: 'projector',
      args: ['--import', 'tsx', 'ws-server/projector/main.ts'],
      environment: { ...withoutWs, ...production },
    },
    {
      name: 'ws',
      args: ['--import', 'tsx', 'ws-server/main.ts'],
      environment: {
        ...forWs,
        ...production,
      },
    },
    {
      name: 'web',
      args: [
        'node_modules/next/dist/bin/next',
        'start',
        '-H',
        '127.0.0.1',
        '-p',
        String(settings.MOTEBOOK_PORT),
      ],
      environment: { ...withoutWs, ...WITHHELD, ...production },
    },
  ];
}
