import 'server-only';
import { headers } from 'next/headers';
import type { z } from 'zod';
import type { Outcome } from './action';
import { clientAddress } from './client-address';
import { refuse } from './refuse';

/** As `action`, for what people do before they are signed in: the command is told where they are, and must count. */
export function openAction<Shape extends z.ZodType, T>(
  name: string,
  shape: Shape,
  run: (input: z.output<Shape>, address: string) => Promise<T>,
): (input: z.input<Shape>) => Promise<Outcome<T>> {
  return async (input) => {
    try {
      return { ok: true, value: await run(shape.parse(input), clientAddress(await headers())) };
    } catch (error) {
      const { code, sentence, fields, incident } = refuse(error, `action ${name}`);
      return { ok: false, refusal: { code, sentence, fields, incident } };
    }
  };
}
