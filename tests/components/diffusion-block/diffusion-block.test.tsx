// @vitest-environment happy-dom
import { afterEach, describe, expect, test } from 'vitest';
import { analyse } from '@/analysis/analyse';
import { scenarioMaker } from '@/analysis/simulate/scenario';
import { settingsOf } from '@/db/inputs/block-settings';
import { msdRows } from '@/components/charts/msd-rows';
import { formatEstimate, formatNumber, quantityText } from '@/components/ui/format-quantity';
import { mount, type Mounted } from './mount';
import { answerOf, attributesOf, id, resultOf, stateOf } from './some-results';

let page: Mounted;
afterEach(() => page.unmount());

const attributes = attributesOf({ caption: 'Beads in water' });
const result = resultOf(attributes);
const headline = quantityText({ symbol: 'D', ...result.D!, unit: 'µm²/s' }).replaceAll('\u2009', ' ');
const done = answerOf([stateOf(attributes, { result })]);

describe('a result', () => {
  test('stands on the page with its interval, verdict, sentence, data, file and engine', async () => {
    page = await mount(attributes, done, { timeZone: 'Europe/Berlin' });
    expect(page.status()).toBe('done');
    const text = page.text();
    expect(text).toContain('Block 2');
    expect(text).toContain(headline);
    expect(text).toContain(result.verdict);
    expect(text).toContain(result.sentence);
    expect(text).toContain('40 tracks, 4,000 positions');
    expect(text).toContain(`SHA-256 ${'b'.repeat(12)}…`);
    expect(text).toContain('Computed by motebook-engine 2 on 2 Mar 2026, 14:05.');
    expect(page.element.querySelector('code')?.textContent).toBe('b'.repeat(64));
    const file = page.element.querySelector<HTMLAnchorElement>('a[download]');
    expect(file?.getAttribute('href')).toBe(`/api/attachments/${id(201)}`);
  });

  test('has a table beside its chart that says the same numbers', async () => {
    page = await mount(attributes, done);
    const cells = [...page.element.querySelectorAll('tbody tr')].map((row) =>
      [...row.children].map((cell) => cell.textContent),
    );
    expect(cells).toEqual(
      msdRows(result.msd!).map((row) => [
        String(row.lag),
        formatNumber(row.tau, 4),
        formatNumber(row.msd, 4),
        formatNumber(1.96 * result.msd!.se[row.lag - 1]!, 2),
        formatNumber(row.fit, 4),
        row.pairs.toLocaleString('en'),
      ]),
    );
  });

  test('shows each warning with a shape and a word, the grave first', async () => {
    const warnings = [
      { code: 'a', level: 'look' as const, message: 'Look at this.' },
      { code: 'b', level: 'problem' as const, message: 'Do not trust this.' },
    ];
    page = await mount(attributes, answerOf([stateOf(attributes, { result: { ...result, warnings } })]));
    const remarks = [...page.element.querySelectorAll('[aria-label="Remarks on this result"] li')];
    expect(remarks.map((one) => one.textContent)).toEqual([
      '▲ ProblemDo not trust this.',
      '◇ LookLook at this.',
    ]);
  });

  test('tells size, viscosity and expectation when medium, temperature and particle are stated', async () => {
    const stated = attributesOf({ medium: 'water', temperature: 25, particleDiameter: 1 });
    const sized = resultOf(stated);
    page = await mount(stated, answerOf([stateOf(stated, { result: sized })]));
    expect(page.text()).toContain('Apparent diameter');
    expect(page.text()).toContain(`Expected D = ${formatNumber(sized.stokesEinstein!.expectedD!, 3)} µm²/s`);
  });

  test('a confinement with its size, in the shape that was chosen', async () => {
    const boxed = { seed: 3, tracks: 20, physics: { box: 0.8, velocity: [0, 0] } };
    const confined = resultOf(attributes, boxed);
    expect(confined.verdict).toBe('confined');
    page = await mount(attributes, answerOf([stateOf(attributes, { result: confined })]));
    expect(page.text()).toContain(
      `Width of the box ${formatEstimate(confined.L!.value, confined.L!.lo, confined.L!.hi).value}`,
    );
    expect(page.text()).toMatch(/between walls|harmonic well/);
    await page.unmount();
    const round = attributesOf({ geometry: 'circle' });
    page = await mount(round, answerOf([stateOf(round, { result: resultOf(round, boxed) })]));
    expect(page.text()).toContain('Radius of the circle');
  });

  test('a flow with its velocity along the axes', async () => {
    const flowing = resultOf(attributes, { physics: { velocity: [0.8, -0.4] } });
    page = await mount(attributes, answerOf([stateOf(attributes, { result: flowing })]));
    expect(flowing.verdict).toBe('directed');
    expect(page.text()).toMatch(/Common velocity v = 0\.[89]\d? µm\/s along \(0\.\d+, −0\.\d+\) µm\/s/);
  });

  test('anomalous motion has no D but K and its exponent', async () => {
    const { trackIds, track, frame, axes } = scenarioMaker({
      motion: { kind: 'power', alpha: 0.5 },
      tracks: 20,
      frames: 100,
      dims: 2,
      x: 0.1,
      exposure: 0,
    })(2);
    const outcome = analyse(
      [
        {
          hash: 'a'.repeat(64),
          trackIds,
          track,
          frame,
          time: null,
          axes,
          frameInterval: 0.1,
          exposure: null,
        },
      ],
      settingsOf(attributes),
    );
    if ('failed' in outcome) throw new Error(outcome.message);
    page = await mount(attributes, answerOf([stateOf(attributes, { result: outcome })]));
    expect(outcome.verdict).toBe('anomalous');
    expect(page.text()).toMatch(/K = [\d.]+ µm²\/sα/);
    expect(page.text()).toContain('Exponent α = 0.');
    expect(page.text()).not.toMatch(/D = [\d.]+ µm²\/s \(/);
  });

  test('a check that asks for a look stands among the remarks, a fine one does not', async () => {
    const checks = [
      { code: 'one-d', level: 'look' as const, p: 1e-5, message: 'The tracks do not agree.' },
      { code: 'halves', level: 'fine' as const, p: 0.4, message: 'D is the same.' },
    ];
    page = await mount(attributes, answerOf([stateOf(attributes, { result: { ...result, checks } })]));
    expect(page.text()).toContain('The tracks do not agree.');
    expect(page.text()).not.toContain('D is the same.');
  });

  test('without D says so and keeps the verdict', async () => {
    const none = { ...result, D: null, verdict: 'undecided' as const, sentence: 'No motion is resolved.' };
    page = await mount(attributes, answerOf([stateOf(attributes, { result: none })]));
    expect(page.text()).toContain('No diffusion coefficient');
    expect(page.text()).toContain('undecided');
  });
});

describe('numbers of earlier settings', () => {
  test('are never shown as current: marked at once, gone when the new ones come', async () => {
    page = await mount(attributes, done);
    await page.fromAfar({ dims: 1 });
    expect(page.status()).toBe('updating');
    expect(page.text()).toContain('of the earlier settings');
    expect(page.text()).toContain('computing again');
    expect(page.text()).toContain(headline);

    const changed = attributesOf({ ...attributes, dims: 1 });
    await page.answer(answerOf([stateOf(changed, { status: 'waiting', result: null, readings: [] })]));
    expect(page.status()).toBe('waiting');
    expect(page.text()).toContain('of the earlier settings');

    const next = resultOf(changed);
    await page.answer(answerOf([stateOf(changed, { result: next })]));
    expect(page.status()).toBe('done');
    expect(page.text()).not.toContain('earlier settings');
    expect(page.text()).not.toContain(headline);
  });

  test('are not shown beside a failure', async () => {
    page = await mount(attributes, done);
    const message = 'No track has two readable positions.';
    const short = attributesOf({ ...attributes, minTrackFrames: 500 });
    await page.fromAfar({ minTrackFrames: 500 });
    await page.answer(answerOf([stateOf(short, { status: 'failed', message })]));
    expect(page.status()).toBe('failed');
    expect(page.text()).toContain(message);
    expect(page.text()).not.toContain(headline);
  });
});

describe('without a result', () => {
  test('a first computation says so quietly', async () => {
    page = await mount(attributes, answerOf([]));
    expect(page.status()).toBe('updating');
    expect(page.text()).toContain('Block –');
    expect(page.text()).toContain('reading and computing');
  });

  test('what holds it up is said in words', async () => {
    const message = 'The file service cannot be reached at the moment.';
    page = await mount(attributes, answerOf([stateOf(attributes, { status: 'waiting', message })]));
    expect(page.text()).toContain(message);
    expect(page.text()).not.toContain('computing …');
  });

  test('a block without a file offers the files of the entry', async () => {
    const empty = attributesOf({ readingIds: [] });
    page = await mount(empty, answerOf([stateOf(empty, { status: 'empty' })]));
    expect(page.text()).toContain('This block has no file yet.');
    await page.choose('File', id(101));
    expect(page.written).toEqual([{ readingIds: [id(101)] }]);
  });

  test('a file that is not of this entry can be taken out', async () => {
    const lost = attributesOf({ readingIds: [id(101), id(500)] });
    page = await mount(lost, answerOf([stateOf(lost, { status: 'failed', message: 'Not of this entry.' })]));
    await page.click('Settings');
    expect(page.text()).toContain('not a file of this entry');
    await page.click('Take out of the block: this file');
    expect(page.written).toEqual([{ readingIds: [id(101)] }]);
  });

  test('unusable attributes are named and can be set back; no number stands beside them', async () => {
    page = await mount(attributes, done, { faulty: ['drift', 'sigma', 'caption'] });
    expect(page.text()).toContain('cannot be used: common drift, localisation error.');
    expect(page.text()).not.toContain(headline);
    await page.click('Set them back');
    expect(page.written).toEqual([{ drift: 'auto', sigma: null }]);
  });

  test('a server that cannot be reached is said, and asked again on request', async () => {
    page = await mount(attributes, new Error('gone'));
    expect(page.status()).toBe('error');
    expect(page.text()).toContain('The server cannot be reached.');
    await page.answer(done);
    expect(page.status()).toBe('done');
    // Once something is known it stays; the page says elsewhere that the connection is gone.
    await page.answer(new Error('gone again'));
    expect(page.status()).toBe('done');
  });

  test('an answer of the wrong shape is refused, not shown', async () => {
    const forged = JSON.parse(JSON.stringify(done)) as typeof done;
    (forged.blocks[0]!.result as unknown as { D: { value: string } }).D.value = '0.5';
    page = await mount(attributes, forged);
    expect(page.status()).toBe('error');
  });
});
