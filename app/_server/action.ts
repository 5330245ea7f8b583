import 'server-only';
import type { z } from 'zod';
import { AppError, type Refusal } from '@/db/errors';
import type { Actor } from '@/db/policies/may';
import { findCurrentActor } from './actor';
import { refuse } from './refuse';

export type Outcome<T> = { ok: true; value: T } | { ok: false; refusal: Refusal };

/**
 * The one wrapper of server actions: parses the input, finds the actor, runs the command, turns errors into answers.
 * (Next itself refuses an action whose Origin is not the host's.)
 */
export function action<Shape extends z.ZodType, T>(
  name: string,
  shape: Shape,
  run: (actor: Actor, input: z.output<Shape>) => Promise<T>,
): (input: z.input<Shape>) => Promise<Outcome<T>> {
  return async (input) => {
    try {
      const actor = await findCurrentActor();
      if (!actor) throw new AppError('not-signed-in');
      return { ok: true, value: await run(actor, shape.parse(input)) };
    } catch (error) {
      const { code, sentence, fields, incident } = refuse(error, `action ${name}`);
      return { ok: false, refusal: { code, sentence, fields, incident } };
    }
  };
}
