import 'server-only';
import { NextResponse, type NextRequest } from 'next/server';
import type { z } from 'zod';
import { env } from '@/db/env';
import { AppError } from '@/db/errors';
import type { Actor } from '@/db/policies/may';
import { findCurrentActor } from './actor';
import { refuse } from './refuse';

const BODY_LIMIT_BYTES = 1024 * 1024;

interface RouteCall<Params, Query, Body> {
  actor: Actor;
  params: Params;
  query: Query;
  body: Body;
  request: NextRequest;
}

/**
 * The one wrapper of route handlers for signed-in people: own origin for anything but GET, actor, zod for path, query and
 * JSON body, errors as JSON with their status. A handler returns data (sent as JSON) or a Response of its own.
 */
export function route<
  Params extends z.ZodType = z.ZodUndefined,
  Query extends z.ZodType = z.ZodUndefined,
  Body extends z.ZodType = z.ZodUndefined,
>(
  name: string,
  shapes: { params?: Params; query?: Query; body?: Body },
  run: (call: RouteCall<z.output<Params>, z.output<Query>, z.output<Body>>) => Promise<unknown>,
) {
  return async (request: NextRequest, context: { params: Promise<unknown> }): Promise<Response> => {
    try {
      if (request.method !== 'GET') checkOrigin(request);
      const actor = await findCurrentActor();
      if (!actor) throw new AppError('not-signed-in');
      const params = shapes.params?.safeParse(await context.params);
      // A path that is not even an id is, to the asker, a thing that does not exist.
      if (params && !params.success) throw new AppError('not-found');
      const answer = await run({
        actor,
        params: params?.data as z.output<Params>,
        query: shapes.query?.parse(readQuery(request)) as z.output<Query>,
        body: shapes.body?.parse(await readBody(request)) as z.output<Body>,
        request,
      });
      return answer instanceof Response ? answer : NextResponse.json(answer, { headers: PRIVATE });
    } catch (error) {
      const { status, ...refusal } = refuse(error, `route ${name}`);
      return NextResponse.json(refusal, { status, headers: PRIVATE });
    }
  };
}

const PRIVATE = { 'Cache-Control': 'private, no-store' };

function checkOrigin(request: NextRequest): void {
  if (request.headers.get('origin') !== new URL(env().NEXTAUTH_URL).origin)
    throw new AppError('foreign-origin');
}

function readQuery(request: NextRequest): Record<string, string> {
  const query: Record<string, string> = {};
  for (const [key, value] of request.nextUrl.searchParams) {
    if (key in query) throw new AppError('bad-input', { sentence: `"${key}" was given twice.` });
    query[key] = value;
  }
  return query;
}

async function readBody(request: NextRequest): Promise<unknown> {
  if (!request.headers.get('content-type')?.startsWith('application/json')) {
    throw new AppError('bad-input', { sentence: 'The request must be JSON.' });
  }
  const text = await request.text();
  if (text.length > BODY_LIMIT_BYTES)
    throw new AppError('too-big', { sentence: 'The request is too large.' });
  try {
    return JSON.parse(text) as unknown;
  } catch {
    throw new AppError('bad-input', { sentence: 'The request is not valid JSON.' });
  }
}
