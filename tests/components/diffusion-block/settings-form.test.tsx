// @vitest-environment happy-dom
import { afterEach, describe, expect, test } from 'vitest';
import type { BlockAttributes } from '@/db/inputs/block-settings';
import { mount, type Mounted } from './mount';
import { answerOf, attributesOf, resultOf, stateOf } from './some-results';

let page: Mounted;
afterEach(() => page.unmount());

async function open(given: Partial<BlockAttributes> = {}, editable = true): Promise<void> {
  const attributes = attributesOf(given);
  page = await mount(attributes, answerOf([stateOf(attributes, { result: resultOf(attributes) })]), {
    editable,
  });
  await page.click('Settings');
}

describe('each control writes one attribute', () => {
  test.each([
    ['Axes', '1', { dims: 1 }],
    ['Common drift', 'keep', { drift: 'keep' }],
    ['Medium', 'water', { medium: 'water' }],
  ])('%s', async (label, value, written) => {
    await open();
    await page.choose(label, value);
    expect(page.written).toEqual([written]);
  });

  test.each([
    ['Shortest track', '5', { minTrackFrames: 5 }],
    ['Exposure', '0,02', { exposureSeconds: 0.02 }],
    ['or its part of the interval', '0.4', { exposureFraction: 0.4 }],
    ['Localisation error σ, if known', '0.03', { sigma: 0.03 }],
    ['Viscosity', '1.2', { viscosity: 1.2 }],
    ['Temperature', '−5', { temperature: -5 }],
    ['Particle diameter', '1', { particleDiameter: 1 }],
    ['First lag', '2', { fitLagFirst: 2 }],
    ['Last lag', '9', { fitLagLast: 9 }],
  ])('%s, when it is left', async (label, words, written) => {
    await open();
    await page.type(label, words);
    expect(page.written).toEqual([]);
    await page.leave(label);
    expect(page.written).toEqual([written]);
  });

  test('Enter writes too; Escape takes back; an emptied field is not stated', async () => {
    await open({ temperature: 25 });
    await page.type('Temperature', '26');
    await page.press('Temperature', 'Escape');
    expect(page.control('Temperature').value).toBe('25');
    await page.type('Temperature', '');
    await page.press('Temperature', 'Enter');
    expect(page.written).toEqual([{ temperature: null }]);
    await page.type('Shortest track', '');
    await page.press('Shortest track', 'Enter');
    // Already at its least: nothing to write.
    expect(page.written.slice(1)).toEqual([]);
  });

  test('the caption, after a pause or when it is left', async () => {
    await open();
    await page.type('Caption', 'Beads\nin water');
    await page.leave('Caption');
    expect(page.written).toEqual([{ caption: 'Beads in water' }]);
  });
});

describe('what is wrong', () => {
  test('is said beside the field, stays there, and is never written', async () => {
    await open();
    await page.type('Temperature', '200');
    await page.leave('Temperature');
    const control = page.control('Temperature');
    expect(control.getAttribute('aria-invalid')).toBe('true');
    expect(control.value).toBe('200');
    const described = control.getAttribute('aria-describedby')?.split(' ') ?? [];
    const sentences = described.map((name) => document.getElementById(name)?.textContent);
    expect(sentences).toContain('Enter a temperature from −50 to 150 °C.');
    expect(page.written).toEqual([]);
    await page.type('Temperature', '20');
    await page.leave('Temperature');
    expect(control.getAttribute('aria-invalid')).toBeNull();
    expect(page.written).toEqual([{ temperature: 20 }]);
  });

  test('of two lags is said too', async () => {
    await open({ fitLagFirst: 4 });
    await page.type('Last lag', '3');
    await page.leave('Last lag');
    expect(page.text()).toContain('The last lag must be larger than the first.');
    expect(page.written).toEqual([]);
  });
});

describe('what others change', () => {
  test('appears', async () => {
    await open();
    await page.fromAfar({ temperature: 31, drift: 'remove', caption: 'Theirs' });
    expect(page.control('Temperature').value).toBe('31');
    expect(page.control('Common drift').value).toBe('remove');
    expect(page.control('Caption').value).toBe('Theirs');
  });

  test('neither takes the focus nor what is being typed, and is told', async () => {
    await open();
    await page.type('Temperature', '2');
    await page.fromAfar({ temperature: 31, sigma: 0.1 });
    expect(document.activeElement).toBe(page.control('Temperature'));
    expect(page.control('Temperature').value).toBe('2');
    expect(page.text()).toContain('Changed to 31 °C meanwhile');
    await page.leave('Temperature');
    expect(page.written).toEqual([{ temperature: 2 }]);
  });
});

describe('what would have no effect', () => {
  test('cannot be set: the part of the interval beside seconds, the viscosity beside a medium', async () => {
    await open({ exposureSeconds: 0.01, medium: 'water' });
    expect(page.control('or its part of the interval').disabled).toBe(true);
    expect(page.control('Viscosity').disabled).toBe(true);
    expect(page.text()).toContain('Not used while seconds are given.');
  });
});

describe('a reader', () => {
  test('sees the settings and changes nothing', async () => {
    await open({ caption: 'Beads' }, false);
    const controls = [...page.element.querySelectorAll<HTMLInputElement>('input, select, textarea')];
    expect(controls.length).toBeGreaterThan(8);
    expect(controls.every((one) => one.disabled)).toBe(true);
    expect(() => page.button('Remove this block')).toThrow();
    expect(() => page.button('Take out')).toThrow();
    expect(page.text()).toContain('Beads');
  });
});

test('a block can be removed, and tracks that were left out can be taken back', async () => {
  await open({ excludedTracks: [{ reading: 0, track: '3', reason: 'stuck' }] });
  await page.click('Take it back in');
  expect(page.written).toEqual([{ excludedTracks: [] }]);
  await page.click('Remove this block');
  expect(page.removed()).toBe(1);
});
