import 'server-only';
import { randomUUID } from 'node:crypto';
import { z } from 'zod';
import { AppError, ERRORS, type Refusal } from '@/db/errors';
import { isDatabaseAway } from '@/db/is-database-away';

/** Turns whatever was thrown into an answer for a person; the unexpected is logged with an id that the person sees too. */
export function refuse(error: unknown, where: string): Refusal & { status: number } {
  if (error instanceof AppError) {
    return { status: error.status, code: error.code, sentence: error.sentence, fields: error.fields };
  }
  if (error instanceof z.ZodError) {
    const fields = Object.fromEntries(error.issues.map((issue) => [issue.path.join('.'), issue.message]));
    return { ...known('bad-input'), fields };
  }
  const incident = randomUUID().slice(0, 8);
  console.error(`[${incident}] ${where}:`, error);
  return { ...known(isDatabaseAway(error) ? 'storage-down' : 'unexpected'), incident };
}

function known(code: keyof typeof ERRORS): Refusal & { status: number } {
  return { status: ERRORS[code].status, code, sentence: ERRORS[code].sentence, fields: {} };
}
