import type { TestProject } from 'vitest/node';
import { newPlace, removePlace, startStack } from './stack';

declare module 'vitest' {
  interface ProvidedContext {
    productUrl: string;
    place: Record<string, string>;
  }
}

/** One product with its demo for all journeys that need no other; ended at the end, with its data. */
export default async function setup(project: TestProject): Promise<() => Promise<void>> {
  const place = await newPlace({ demo: true });
  const stack = await startStack(place);
  project.provide('productUrl', stack.url);
  project.provide('place', place);
  return async () => {
    await stack.stop();
    await removePlace(place);
  };
}
