import { execFile } from 'node:child_process';
import { mkdtemp, rm, writeFile } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import path from 'node:path';
import { afterAll, beforeAll, describe, expect, test } from 'vitest';
import { scenarioMaker, type Motion } from '../../analysis/simulate/scenario';
import { toCsv } from '../../analysis/simulate/data-set';
import { goldenCase, goldenNames } from '../analysis/golden';

/** The command as a person starts it: a process of its own, with its exit code and both its outputs. */
const PROJECT = path.resolve(import.meta.dirname, '../..');
const golden = (name: string) => path.join(PROJECT, 'tests/fixtures/golden', goldenCase(name).file);

interface Line {
  file: string;
  error?: string;
  D: number | null;
  D_lo: number | null;
  D_hi: number | null;
  sigma: number | null;
  verdict: string;
  v: number | null;
  L: number | null;
  alpha: number | null;
  tracks: number;
  frames: number;
  warnings: string[];
}

function run(...args: string[]): Promise<{ code: number; lines: Line[]; out: string; err: string }> {
  return new Promise((resolve) => {
    execFile(
      process.execPath,
      ['--import', 'tsx', 'scripts/analyse.ts', ...args],
      { cwd: PROJECT, env: { ...process.env, npm_lifecycle_event: '' } },
      (error, out, err) => {
        const code = error ? Number(error.code) : 0;
        const lines = args.includes('--json')
          ? out
              .trim()
              .split('\n')
              .filter(Boolean)
              .map((line) => JSON.parse(line) as Line)
          : [];
        resolve({ code, lines, out, err });
      },
    );
  });
}

let folder: string;
beforeAll(async () => {
  folder = await mkdtemp(path.join(tmpdir(), 'motebook-analyse-'));
});
afterAll(() => rm(folder, { recursive: true }));

async function file(name: string, content: string | Uint8Array): Promise<string> {
  const place = path.join(folder, name);
  await writeFile(place, content);
  return place;
}

async function simulated(motion: Motion, tracks = 20): Promise<string> {
  const data = scenarioMaker({ motion, tracks, frames: 120, dims: 2, x: 0.1, exposure: 1 })(3);
  const name = `${JSON.stringify(motion).replaceAll(/\W/g, '')}.csv`;
  // Frames of one second.
  return file(name, toCsv({ ...data, time: Float64Array.from(data.frame!) }, 6));
}

describe('golden files give the numbers of an independent program', () => {
  test('one line a file, nothing else on stdout', async () => {
    const names = ['g01_free_2d', 'g04_free_1d', 'g11_mixture'];
    const { code, lines, err } = await run(...names.map(golden), '--exposure-fraction', '0', '--json');
    expect(code).toBe(0);
    expect(err).toBe('');
    expect(lines.map((line) => line.file)).toEqual(names.map(golden));
    for (const [i, name] of names.entries()) {
      const { mle } = goldenCase(name).reference;
      expect(Math.abs(lines[i]!.D! / mle.D_mle - 1)).toBeLessThan(1e-6);
      expect(lines[i]!.sigma).toEqual(mle.s2_mle > 0 ? expect.closeTo(Math.sqrt(mle.s2_mle), 6) : null);
      expect(lines[i]).toMatchObject({ verdict: 'free', L: null });
      expect(lines[i]!.D_lo).toBeLessThan(lines[i]!.D!);
      expect(lines[i]!.D_hi).toBeGreaterThan(lines[i]!.D!);
      expect(lines[i]!.alpha).toEqual(expect.any(Number));
    }
  });

  test.each(goldenNames.filter((name) => !['g00_hand', 'g13_pixels_frames'].includes(name)))(
    '%s: verdict, and D where there is one',
    async (name) => {
      const facts = goldenCase(name);
      const { code, lines } = await run(
        golden(name),
        '--exposure-fraction',
        String(facts.exposure_fraction),
        '--json',
      );
      expect(code).toBe(0);
      const [line] = lines as [Line];
      expect(line.verdict).toBe(facts.truth.verdict);
      const { mle, after_common_mode_removal: corrected } = facts.reference;
      if (line.verdict === 'anomalous') expect(line.D).toBeNull();
      else if (line.verdict !== 'confined')
        expect(Math.abs(line.D! / (corrected ?? mle).D_mle - 1)).toBeLessThan(1e-6);
      expect(line.L === null).toBe(line.verdict !== 'confined');
      expect(line.v === null).toBe(line.verdict !== 'directed');
    },
  );

  test('pixels and frames: both have to be stated, and the result is then that of the file in µm and s', async () => {
    const name = golden('g13_pixels_frames');
    const silent = await run(name, '--json');
    expect(silent).toMatchObject({ code: 2, lines: [] });
    expect(silent.err).toContain('--frame-interval SECONDS');
    expect(silent.err).toContain('--pixel-size MICROMETRES');
    const { code, lines } = await run(
      ...[name, '--frame-interval', '0.04', '--pixel-size', '0.107', '--exposure', '0.04', '--json'],
    );
    expect(code).toBe(0);
    const { mle } = goldenCase('g13_pixels_frames').reference;
    expect(Math.abs(lines[0]!.D! / mle.D_mle - 1)).toBeLessThan(1e-6);
    expect(lines[0]!.sigma).toBeCloseTo(Math.sqrt(mle.s2_mle), 6);
  });
});

describe('what motion is called', () => {
  test('each kind of motion that was simulated, with its numbers', async () => {
    const files = await Promise.all([
      simulated({ kind: 'box', width: 6 }),
      simulated({ kind: 'flow', speed: 0.5 }),
      simulated({ kind: 'own', speed: 0.8 }),
      simulated({ kind: 'power', alpha: 0.5 }),
    ]);
    const { code, lines } = await run(...files, '--exposure', '1', '--json');
    expect(code).toBe(0);
    const [box, flow, own, power] = lines as [Line, Line, Line, Line];
    expect(box.verdict).toBe('confined');
    expect(Math.abs(box.L! / 6 - 1)).toBeLessThan(0.1);
    expect(flow.verdict).toBe('directed');
    expect(Math.abs(flow.v! / 0.5 - 1)).toBeLessThan(0.2);
    expect(own.verdict).toBe('directed');
    expect(Math.abs(own.v! / 0.8 - 1)).toBeLessThan(0.3);
    expect(power).toMatchObject({ verdict: 'anomalous', D: null, D_lo: null, D_hi: null });
    expect(Math.abs(power.alpha! - 0.5)).toBeLessThan(0.15);
  });

  test('an exposure that nobody stated is zero, with a warning', async () => {
    const { lines } = await run(golden('g02_free_2d_noise_blur'), '--json');
    expect(lines[0]!.warnings).toContain('exposure-not-stated');
    const stated = await run(golden('g02_free_2d_noise_blur'), '--exposure', '0', '--json');
    expect(stated.lines[0]!.warnings).not.toContain('exposure-not-stated');
    expect(stated.lines[0]!.D).toBe(lines[0]!.D);
  });

  test('a known σ is taken, and fewer axes when asked', async () => {
    const { lines } = await run(golden('g14_short'), '--sigma', '0.1', '--dims', '1', '--json');
    expect(lines[0]!.sigma).toBeCloseTo(0.1, 12);
    const both = await run(golden('g14_short'), '--sigma', '0.1', '--json');
    expect(both.lines[0]!.D).not.toBe(lines[0]!.D);
  });
});

describe('units', () => {
  let [x, y] = [0, 0];
  const rows = Array.from({ length: 40 }, (_, i) => {
    x += Math.sin(i * i);
    y += Math.cos(5 * i * i);
    return `1,${i},${x},${y}`;
  }).join('\n');

  test('without units a file is in µm and s; one in the header wins over --pixel-size', async () => {
    const bare = await file('bare.csv', `track,t,x,y\n${rows}\n`);
    const nm = await file('nm.csv', `track,t (ms),x (nm),y (nm)\n${rows}\n`);
    const { lines } = await run(bare, nm, '--json');
    // (10⁻³)² of a length over 10⁻³ of a time.
    expect(lines[1]!.D! / lines[0]!.D!).toBeCloseTo(1e-3, 9);
    const { lines: ignored } = await run(nm, '--pixel-size', '0.1', '--json');
    expect(ignored[0]!.D).toBe(lines[1]!.D);
    expect(ignored[0]!.warnings).toContain('pixel-size-not-used');
    const { lines: pixels } = await run(bare, '--pixel-size', '0.1', '--json');
    expect(pixels[0]!.D! / lines[0]!.D!).toBeCloseTo(0.01, 9);
  });

  test('a frame interval that contradicts the times is refused, one that agrees is taken', async () => {
    const bare = await file('bare.csv', `track,t,x,y\n${rows}\n`);
    const wrong = await run(bare, '--frame-interval', '0.5', '--json');
    expect(wrong).toMatchObject({ code: 2, lines: [] });
    expect(wrong.err).toMatch(/1 s apart, but the stated frame interval is 0\.5 s/);
    expect((await run(bare, '--frame-interval', '1.0', '--json')).code).toBe(0);
  });

  test('unreadable rows are told on stderr and counted, and the rest is analysed', async () => {
    const holes = await file('holes.csv', `track,t,x,y\n${rows}\n2,0,abc,1\n2,1,1,1\n`);
    const { code, err, lines } = await run(holes, '--json');
    expect(code).toBe(0);
    expect(err).toContain('line 42');
    expect(lines[0]!.warnings).toContain('rows-not-used');
  });
});

describe('bad input ends with 2 and a reason on stderr', () => {
  test('files', async () => {
    const bad = [
      ['no-such-file.csv', /no such file/i],
      [folder, /folder/],
      [await file('empty.csv', ''), /empty/i],
      [
        await file('picture.csv', Uint8Array.of(0x89, 0x50, 0x4e, 0x47, 0x0d, 0x0a, 0x1a, 0x0a, 0, 0)),
        /picture|image|PNG/,
      ],
      [await file('words.csv', 'Dear colleague,\nthe tracks are coming.\n'), /./],
      [await file('still.csv', 'track,t,x,y\n1,0,1,1\n1,1,1,1\n1,2,1,1\n'), /the same/],
    ] as const;
    for (const [name, reason] of bad) {
      const { code, out, err } = await run(name, '--json');
      expect(code, name).toBe(2);
      expect(out, name).toBe('');
      expect(err, name).toMatch(reason);
    }
  });

  test('of several files a bad one has its line, and the others theirs', async () => {
    const { code, lines, err } = await run(
      golden('g01_free_2d'),
      'missing.csv',
      golden('g04_free_1d'),
      '--json',
    );
    expect(code).toBe(2);
    expect(lines.map(({ file: name, error }) => [path.basename(name), error !== undefined])).toEqual([
      ['g01_free_2d.csv', false],
      ['missing.csv', true],
      ['g04_free_1d.csv', false],
    ]);
    expect(err).toContain('missing.csv');
  });

  test.each([
    [[], /Name at least one file/],
    [['x.csv', '--exposure', 'long'], /--exposure wants a number of seconds/],
    [['x.csv', '--exposure', '1', '--exposure-fraction', '1'], /exposure once/],
    [['x.csv', '--dims', '4'], /--dims wants 1, 2 or 3/],
    [['x.csv', '--medium', 'honey'], /"water"/],
    [['x.csv', '--frame-interval', '-1'], /above zero/],
    [['x.csv', '--temperature', '-300'], /degrees Celsius/],
    [['x.csv', '--what'], /--what/],
  ])('options %j', async (args, reason) => {
    const { code, out, err } = await run(...args);
    expect(code).toBe(2);
    expect(out).toBe('');
    expect(err).toMatch(reason);
  });

  test('help is no mistake', async () => {
    const { code, out } = await run('--help');
    expect(code).toBe(0);
    for (const option of ['--frame-interval', '--pixel-size', '--exposure-fraction', '--sigma', '--json'])
      expect(out).toContain(option);
  });
});

test('for people: a table with the unit in its headings, and the sentence of each', async () => {
  const { code, out } = await run(golden('g06_flow'), '--exposure-fraction', '1');
  expect(code).toBe(0);
  expect(out).toContain('D (µm²/s)');
  expect(out).toMatch(/directed/);
  expect(out).toContain('drift together');
});
