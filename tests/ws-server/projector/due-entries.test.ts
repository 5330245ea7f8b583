import { expect, test } from 'vitest';
import { DueEntries } from '../../../ws-server/projector/due-entries';

test('an entry marked many times is read once, and again only after a rest', () => {
  let now = 0;
  const due = new DueEntries(() => now);
  for (let i = 0; i < 5; i++) due.mark('a');
  expect([due.take(), due.take()]).toEqual(['a', null]);
  due.mark('a');
  due.done('a', false);
  expect(due.take()).toBeNull();
  const wait = due.nextInMs()!;
  expect(wait).toBeGreaterThan(0);
  now += wait;
  expect(due.take()).toBe('a');
  expect(due.nextInMs()).toBeNull();
});

test('one that fails rests longer and longer, up to a bound, and holds up no other', () => {
  let now = 0;
  const due = new DueEntries(() => now);
  const pauses: number[] = [];
  for (let i = 0; i < 12; i++) {
    due.mark('broken');
    expect(due.take()).toBe('broken');
    due.done('broken', true);
    due.mark('broken');
    due.mark('other');
    expect(due.take()).toBe('other');
    pauses.push(due.nextInMs()!);
    now += due.nextInMs()!;
  }
  expect(pauses.every((pause, i) => i === 0 || pause >= pauses[i - 1]!)).toBe(true);
  expect(pauses.at(-1)).toBe(pauses.at(-2));
  due.mark('broken');
  due.take();
  due.done('broken', false);
  due.mark('broken');
  expect(due.nextInMs()!).toBeLessThan(pauses[0]!);
});

test('once the fault is mended, what failed is read at once', () => {
  let now = 0;
  const due = new DueEntries(() => now);
  for (let i = 0; i < 6; i++) {
    due.mark('failed');
    now += due.nextInMs()!;
    expect(due.take()).toBe('failed');
    due.done('failed', true);
  }
  due.mark('failed');
  expect(due.take()).toBeNull();
  due.forgetFaults();
  expect(due.nextInMs()).toBe(0);
  expect(due.take()).toBe('failed');
});
