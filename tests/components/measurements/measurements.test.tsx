// @vitest-environment happy-dom
import { act } from 'react';
import { createRoot, type Root } from 'react-dom/client';
import { afterEach, beforeEach, describe, expect, test, vi } from 'vitest';
import { Measurements } from '@/components/measurements/measurements';
import { QueryProvider } from '@/components/query-provider';
import type { MeasurementPage, MeasurementRow } from '@/db/inputs/measurement';

/** The page's part in a document of its own; the address is the document's, the server's answers are the test's. */
vi.mock('next/navigation', async () => {
  const { useSyncExternalStore } = await import('react');
  const subscribe = (listener: () => void) => {
    window.addEventListener('address', listener);
    window.addEventListener('popstate', listener);
    return () => {
      window.removeEventListener('address', listener);
      window.removeEventListener('popstate', listener);
    };
  };
  return {
    useSearchParams: () => new URLSearchParams(useSyncExternalStore(subscribe, () => window.location.search)),
  };
});
vi.mock('next/link', () => ({ default: (props: object) => <a {...props} /> }));

const NOTEBOOKS = [
  { id: '0b0e6a3e-5b1d-4c7a-9f6e-2d1c0b9a8f70', code: 'GLY', title: 'Beads in glycerol' },
  { id: '0b0e6a3e-5b1d-4c7a-9f6e-2d1c0b9a8f71', code: 'LIP', title: 'Vesicles' },
];
const ENTRY = '7a1d6a3e-5b1d-4c7a-9f6e-2d1c0b9a8f00';
const row = (n: number, given: Partial<MeasurementRow> = {}): MeasurementRow => ({
  ...{ entryId: ENTRY, blockId: `b${n}`, position: n, caption: '', notebookId: NOTEBOOKS[0]!.id },
  ...{ notebookCode: 'GLY', notebookTitle: 'Beads in glycerol', number: 4, title: `Day ${n}` },
  ...{ experimentDate: '2026-03-02', state: 'draft', people: ['Noor'], verdict: 'free' },
  ...{ d: { value: 0.431, lo: 0.418, hi: 0.445 }, tracks: 1200 },
  ...given,
});
const page = (rows: MeasurementRow[], given: Partial<MeasurementPage> = {}): MeasurementPage => ({
  rows,
  next: null,
  summary: {
    total: { count: rows.length, more: false },
    extent: rows.length > 0 ? { lo: 0.418, hi: 0.445 } : null,
    withoutD: null,
    without: [],
  },
  ...given,
});

let root: Root;
let home: HTMLElement;
const asked: string[] = [];
/** How long the page takes to hear of its new address, milliseconds. */
let addressDelay = 0;
let answer: (query: string) => { status?: number; body: unknown } | Error;

beforeEach(async () => {
  vi.useFakeTimers();
  vi.stubGlobal('IS_REACT_ACT_ENVIRONMENT', true);
  vi.stubGlobal('fetch', async (path: string) => {
    asked.push(path.replace(/^\/api\/measurements\?/, ''));
    const given = answer(path);
    if (given instanceof Error) throw given;
    return Response.json(given.body, { status: given.status ?? 200 });
  });
  for (const step of ['pushState', 'replaceState'] as const) {
    const real = window.history[step].bind(window.history);
    vi.spyOn(window.history, step).mockImplementation((...given) => {
      real(...given);
      if (addressDelay === 0) window.dispatchEvent(new Event('address'));
      else setTimeout(() => window.dispatchEvent(new Event('address')), addressDelay);
    });
  }
  (window as unknown as { happyDOM: { setURL(url: string): void } }).happyDOM.setURL(
    'http://127.0.0.1/measurements',
  );
  asked.length = 0;
  addressDelay = 0;
  answer = () => ({ body: page([row(1), row(2)]) });
  home = document.body.appendChild(document.createElement('div'));
  root = createRoot(home);
});
afterEach(async () => {
  await act(async () => root.unmount());
  home.remove();
  vi.restoreAllMocks();
  vi.unstubAllGlobals();
  vi.useRealTimers();
});

const pass = (milliseconds: number) =>
  act(async () => void (await vi.advanceTimersByTimeAsync(milliseconds)));
async function open(query = ''): Promise<void> {
  window.history.replaceState(null, '', `/measurements${query}`);
  await act(async () =>
    root.render(
      <QueryProvider>
        <Measurements notebooks={NOTEBOOKS} mayWrite />
      </QueryProvider>,
    ),
  );
  await pass(10);
}

function field(name: RegExp): HTMLInputElement {
  const label = [...home.querySelectorAll('label')].find(({ textContent }) => name.test(textContent));
  const input =
    label?.querySelector('input') ?? home.querySelector(`#${CSS.escape(label?.htmlFor ?? 'none')}`);
  if (!(input instanceof HTMLInputElement)) throw new Error(`no field is called ${name}`);
  return input;
}
async function press(name: RegExp): Promise<void> {
  const button = [...home.querySelectorAll('button')].find(({ textContent }) => name.test(textContent));
  if (!button) throw new Error(`no button says ${name}`);
  await act(async () => button.click());
  await pass(10);
}
/** As a browser does it: React listens for the event, and keeps the value that it set itself in a property of its own. */
const type = (input: HTMLInputElement, text: string) =>
  act(async () => {
    Object.getOwnPropertyDescriptor(HTMLInputElement.prototype, 'value')?.set?.call(input, text);
    input.dispatchEvent(new Event('input', { bubbles: true }));
  });
const errorOf = (input: HTMLInputElement) =>
  document.getElementById(input.getAttribute('aria-describedby') ?? 'none')?.textContent;
const FROM = /^from, D/;
const TO = /^to, D/;

describe('the list of measurements', () => {
  test('asks for everything at first, and each row leads to its block', async () => {
    await open();
    expect(asked).toEqual(['']);
    expect([...home.querySelectorAll('tbody a')].map((link) => link.getAttribute('href'))).toEqual([
      `/entries/${ENTRY}#block-b1`,
      `/entries/${ENTRY}#block-b2`,
    ]);
    const first = home.querySelector('tbody tr')?.textContent;
    for (const part of [
      'GLY 4',
      'block 1',
      'Day 1',
      'Noor',
      '2 Mar 2026',
      'draft',
      '0.431',
      '0.418–0.445',
      'free',
      '1,200',
    ])
      expect(first).toContain(part);
  });

  test('says why a result has no D', async () => {
    answer = () => ({ body: page([row(1, { d: null, verdict: 'anomalous' }), row(2, { d: null })]) });
    await open();
    expect(home.textContent).toContain('no single D');
    expect(home.textContent).toContain('The mean squared displacement'.toLowerCase());
    expect(home.textContent).toContain(
      'The positions move no more than the localisation error'.toLowerCase(),
    );
  });

  test('shows more from where the page ended', async () => {
    answer = (query) => ({
      body: query.includes('after=here')
        ? page([row(3)], { summary: null })
        : page([row(1)], { next: 'here' }),
    });
    await open('?sort=d-asc');
    await press(/^Show more$/);
    expect(asked).toEqual(['sort=d-asc', 'sort=d-asc&after=here']);
    expect(home.querySelectorAll('tbody tr')).toHaveLength(2);
    expect([...home.querySelectorAll('button')].some(({ textContent }) => textContent === 'Show more')).toBe(
      false,
    );
  });
});

describe('asking for a range of D', () => {
  test('waits for a pause in typing, then stands in the address; one field is one step back', async () => {
    await open();
    const before = vi.mocked(window.history.pushState).mock.calls.length;
    await type(field(FROM), '0');
    await type(field(FROM), '0.');
    await type(field(FROM), '0.3');
    expect(window.location.search).toBe('');
    await pass(500);
    expect(window.location.search).toBe('?dFrom=0.3');
    await type(field(FROM), '0.30');
    await pass(500);
    await type(field(FROM), '0.35');
    await pass(500);
    expect(window.location.search).toBe('?dFrom=0.35');
    expect(asked).toEqual(['', 'dFrom=0.3', 'dFrom=0.35']);
    expect(vi.mocked(window.history.pushState).mock.calls.length - before).toBe(1);
  });

  test('what is typed in one field is not lost when the other one is applied meanwhile', async () => {
    await open();
    addressDelay = 100;
    await type(field(FROM), '0.45');
    await act(async () => void field(FROM).dispatchEvent(new Event('focusout', { bubbles: true })));
    await type(field(TO), '0');
    await pass(150);
    expect(window.location.search).toBe('?dFrom=0.45');
    expect(field(TO).value).toBe('0');
    await type(field(TO), '0.52');
    await pass(700);
    expect(window.location.search).toBe('?dFrom=0.45&dTo=0.52');
    expect([field(FROM).value, field(TO).value]).toEqual(['0.45', '0.52']);
  });

  test('keeps what was typed, also its zeros', async () => {
    await open();
    await type(field(TO), '0.60');
    await pass(500);
    expect(window.location.search).toBe('?dTo=0.6');
    expect(field(TO).value).toBe('0.60');
  });

  test('a decimal comma is read as it is meant', async () => {
    await open();
    await type(field(TO), '0,62');
    await pass(500);
    expect(window.location.search).toBe('?dTo=0.62');
    expect(field(TO).value).toBe('0,62');
  });

  test.each([
    ['abc', 'Enter a number in µm²/s, such as 0.43 or 2e-3.'],
    ['1,234', 'Write the decimal with a point, as in 0.43.'],
    ['-1', 'D is never negative. Enter zero or more.'],
  ])('%s is not applied, stays, and is explained', async (text, message) => {
    await open('?dTo=2');
    await type(field(FROM), text);
    await pass(500);
    expect(errorOf(field(FROM))).toBe(`Not applied, “from”: ${message}`);
    expect(field(FROM).getAttribute('aria-invalid')).toBe('true');
    expect(field(FROM).value).toBe(text);
    expect(window.location.search).toBe('?dTo=2');
    await type(field(FROM), '0.43');
    await pass(500);
    expect(field(FROM).getAttribute('aria-invalid')).toBeNull();
    expect(window.location.search).toBe('?dFrom=0.43&dTo=2');
  });

  test('a reversed range is explained at its upper end, and is right as soon as the lower end is', async () => {
    await open('?dFrom=0.6');
    await type(field(TO), '0.3');
    await pass(500);
    expect(errorOf(field(TO))).toBe('Not applied, “to”: The upper bound is below the lower one.');
    await type(field(FROM), '0.2');
    await pass(500);
    expect(field(TO).getAttribute('aria-invalid')).toBeNull();
    expect(window.location.search).toBe('?dFrom=0.2&dTo=0.3');
  });

  test('going back brings the fields back', async () => {
    await open('?dFrom=0.3');
    await type(field(FROM), '0.5');
    await pass(500);
    await act(async () => {
      window.history.replaceState(null, '', '/measurements?dFrom=0.3');
      window.dispatchEvent(new Event('popstate'));
    });
    expect(field(FROM).value).toBe('0.3');
  });

  test('an address that somebody wrote wrongly shows in the field what it says, and why it is not used', async () => {
    await open('?dFrom=many&verdict=free');
    expect(field(FROM).value).toBe('many');
    expect(errorOf(field(FROM))).toContain('Enter a number in µm²/s, such as 0.43 or 2e-3.');
    expect(asked).toEqual(['verdict=free']);
    await press(/^Clear all filters$/);
    expect(field(FROM).value).toBe('');
    expect(window.location.search).toBe('');
  });
});

describe('choosing', () => {
  test('verdicts and notebooks are lists in a fixed order, and each choice is a step back', async () => {
    await open();
    const before = vi.mocked(window.history.pushState).mock.calls.length;
    for (const name of [/^confined$/, /^free$/, /Vesicles/, /inside the range/])
      await act(async () => field(name).click());
    await pass(10);
    expect(Object.fromEntries(new URLSearchParams(window.location.search))).toEqual({
      range: 'inside',
      verdict: 'free,confined',
      notebook: NOTEBOOKS[1]!.id,
    });
    expect(vi.mocked(window.history.pushState).mock.calls.length - before).toBe(4);
  });

  test('two boxes ticked before the page hears of its address both count', async () => {
    await open();
    addressDelay = 100;
    for (const name of [/^free$/, /^confined$/]) {
      await act(async () => field(name).click());
      expect(field(name).checked).toBe(true);
    }
    await pass(300);
    expect(window.location.search).toBe('?verdict=free%2Cconfined');
    expect([field(/^free$/).checked, field(/^confined$/).checked]).toEqual([true, true]);
  });

  test('a notebook of the address that one may not read can be left out', async () => {
    await open('?notebook=0b0e6a3e-5b1d-4c7a-9f6e-2d1c0b9a8fff');
    await press(/^Leave it out$/);
    expect(window.location.search).toBe('');
  });

  test('a column head sorts, and turns the order round', async () => {
    await open();
    await press(/^D and verdict$/);
    expect(window.location.search).toBe('?sort=d-asc');
    await press(/^D and verdict$/);
    expect(window.location.search).toBe('?sort=d-desc');
    expect(home.querySelector('[aria-sort="descending"]')?.textContent).toBe('D and verdict');
  });
});

describe('when there is nothing to show', () => {
  test('nothing measured yet: says what will be here and where to begin', async () => {
    answer = () => ({ body: page([]) });
    await open();
    expect(home.textContent).toContain('Every D that your notebooks record will stand here');
    expect(home.querySelector('section a')?.getAttribute('href')).toBe('/');
  });

  test('no match: offers the changes that help, with what they find', async () => {
    const without = [
      { what: 'range' as const, count: 12, more: false },
      { what: 'verdict' as const, count: 0, more: false },
    ];
    answer = (query) => ({
      body: query.includes('dFrom')
        ? page([], { summary: { ...page([]).summary!, withoutD: { count: 1, more: false }, without } })
        : page([row(1)]),
    });
    await open('?dFrom=5&verdict=free');
    expect(home.textContent).toContain('finds 12 measurements');
    expect(home.textContent).not.toContain('Ask for any verdict');
    expect(home.textContent).toContain('1 result meets the other filters but has no D');
    await press(/^Ask for any D$/);
    expect(window.location.search).toBe('?verdict=free');
    expect(field(FROM).value).toBe('');
    expect(home.querySelectorAll('tbody tr')).toHaveLength(1);
  });

  test('no line: says so after trying again, keeps the question, and goes on when asked', async () => {
    answer = () => new TypeError('failed to fetch');
    await open('?verdict=free');
    await pass(10_000);
    expect(home.querySelector('[role=alert] + *, [role=alert]')).not.toBeNull();
    expect(home.textContent).toContain('The server cannot be reached.');
    expect(home.textContent).toContain('Your filters are kept.');
    answer = () => ({ body: page([row(1)]) });
    await press(/^Try again$/);
    await pass(10);
    expect(home.textContent).not.toContain('The server cannot be reached.');
    expect(home.querySelectorAll('tbody tr')).toHaveLength(1);
    expect(window.location.search).toBe('?verdict=free');
  });

  test('signed out: leads to the sign-in and back to this question', async () => {
    answer = () => ({
      status: 401,
      body: { code: 'not-signed-in', sentence: 'Please sign in.', fields: {} },
    });
    await open('?dFrom=0.3');
    const link = [...home.querySelectorAll('a')].find(({ textContent }) => /^Sign in/.test(textContent));
    expect(link?.getAttribute('href')).toBe('/sign-in?callbackUrl=%2Fmeasurements%3FdFrom%3D0.3');
  });

  test('an answer of another shape is not shown as if it were one', async () => {
    answer = () => ({ body: { rows: [{ title: 'only a title' }] } });
    await open();
    await pass(10_000);
    expect(home.textContent).toContain('do not fit together any more. Reload the page.');
    expect(home.querySelector('tbody')).toBeNull();
  });
});
