import 'server-only';
import { notFound } from 'next/navigation';
import { AppError } from '@/db/errors';

/** For pages: what the actor may not know of looks like an address that leads nowhere. Other faults stay what they are. */
export async function orNotFound<T>(found: Promise<T>): Promise<T> {
  try {
    return await found;
  } catch (error) {
    if (error instanceof AppError && error.code === 'not-found') notFound();
    throw error;
  }
}
