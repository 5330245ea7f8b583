// @vitest-environment happy-dom
import { act } from 'react';
import { createRoot, type Root } from 'react-dom/client';
import { afterEach, beforeEach, describe, expect, test } from 'vitest';
import { precisionOf } from '@/analysis/planner/precision';
import { precisionAnswers, reachAnswers, smallestDrift } from '@/components/planner/answers';
import { Planner } from '@/components/planner/planner';

Object.assign(globalThis, { IS_REACT_ACT_ENVIRONMENT: true });
const plan = {
  D: 0.5,
  tracks: 20,
  frames: 100,
  interval: 0.05,
  exposure: 0.5,
  sigma: 0.03,
  dims: 2,
} as const;

describe('answers', () => {
  test('say what the bound of theory says', () => {
    const [first, tracks] = precisionAnswers(plan);
    expect(first!.answer).toContain(`${Number((100 * precisionOf(plan).relative).toPrecision(2))}\u00a0%`);
    const needed = tracks!.answer
      .split(', as')[0]!
      .split(', ')
      .map((n) => Number(n.replace(/\D/g, '')));
    expect(needed[1]! / needed[0]!).toBeCloseTo(4, 0);
    // 5 % with N tracks is what the bound gives for N and not for fewer.
    expect(precisionOf({ ...plan, tracks: needed[1]! }).relative).toBeLessThanOrEqual(0.05);
    expect(precisionOf({ ...plan, tracks: needed[1]! - 1 }).relative).toBeGreaterThan(0.05);
  });

  test('the smallest drift falls as the root of the tracks', () => {
    expect(smallestDrift(plan) / smallestDrift({ ...plan, tracks: 80 })).toBeCloseTo(2, 9);
    // Methods of the field: 80 % power at the 2.5 % level in two axes needs |v|²T/(2D) = 11.5 without error and blur.
    const plain = { ...plan, sigma: 0, exposure: 0, frames: 10_000, tracks: 1 };
    const time = (plain.frames - 1) * plain.interval;
    expect((smallestDrift(plain) ** 2 * time) / (2 * plain.D)).toBeCloseTo(11.5, 1);
  });

  test('more data see more', () => {
    const share = (text: string) => Number(/(\d+)\s%/.exec(text)?.[1]);
    const few = reachAnswers({ ...plan, tracks: 2 }).map(({ answer }) => share(answer));
    const many = reachAnswers({ ...plan, tracks: 60 }).map(({ answer }) => share(answer));
    for (let i = 1; i < few.length; i++) expect(many[i]).toBeGreaterThanOrEqual(few[i]!);
  });
});

describe('the page', () => {
  let host: HTMLElement;
  let root: Root;
  beforeEach(async () => {
    host = document.body.appendChild(document.createElement('div'));
    root = createRoot(host);
    await act(async () => root.render(<Planner />));
  });
  afterEach(async () => {
    await act(async () => root.unmount());
    host.remove();
  });
  const field = (label: string) => {
    const found = [...host.querySelectorAll('label')].find((one) => one.textContent === label);
    return host.querySelector<HTMLInputElement>(`#${CSS.escape(found?.htmlFor ?? '')}`)!;
  };
  const type = (label: string, text: string) =>
    act(async () => {
      const setter = Object.getOwnPropertyDescriptor(HTMLInputElement.prototype, 'value')!.set!;
      setter.call(field(label), text);
      field(label).dispatchEvent(new Event('input', { bubbles: true }));
    });

  test('answers change with what is typed, also with a decimal comma', async () => {
    const before = host.textContent;
    await type('Localisation error', '0,2');
    expect(field('Localisation error').value).toBe('0,2');
    expect(host.textContent).not.toBe(before);
  });

  test('what cannot be read is explained beside its field, and nothing is computed from it', async () => {
    await type('Tracks', 'many');
    expect(field('Tracks').getAttribute('aria-invalid')).toBe('true');
    expect(host.textContent).toContain('A whole number from 1.');
    expect(host.textContent).toContain('Nothing is computed until every number can be read.');
    // The other half goes on.
    expect(host.textContent).toContain('How much of the faster has crossed?');
  });

  test('the slower species may not be the faster', async () => {
    await type('D of the slower', '500');
    expect(host.textContent).toContain('The first D must be the larger one.');
  });
});
