import type { NextRequest } from 'next/server';
import { createRouteHandler } from 'uploadthing/next';
import { env } from '@/db/env';
import { uploads } from './core';

type Handlers = ReturnType<typeof createRouteHandler>;
let handlers: Handlers | null = null;

/** Made at the first request: a build has no environment to read. */
function handler(): Handlers {
  const callbackUrl = `${new URL(env().NEXTAUTH_URL).origin}/api/uploadthing`;
  handlers ??= createRouteHandler({
    router: uploads,
    // At its own level the SDK writes every signed address into the log.
    config: { token: env().UPLOADTHING_TOKEN, callbackUrl, logLevel: 'Warning' },
  });
  return handlers;
}

export const GET = (request: NextRequest) => handler().GET(request);
export const POST = (request: NextRequest) => handler().POST(request);
