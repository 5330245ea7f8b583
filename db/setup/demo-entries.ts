import { otherEntries } from './demo-entries-other';
import { tracerEntries } from './demo-entries-tracers';
import { viscosityEntries } from './demo-entries-viscosity';
import type { DemoEntry } from './demo-plan';

/** All entries of the demo in the order in which they were begun, each notebook's numbers with them. */
export function demoEntries(): DemoEntry[] {
  return [...tracerEntries(), ...viscosityEntries(), ...otherEntries()].sort((a, b) => b.daysAgo - a.daysAgo);
}
