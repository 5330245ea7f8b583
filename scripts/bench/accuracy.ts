/**
 * How often verdicts are right and intervals hold the truth, by simulation with fixed seeds:
 * `npm run bench:accuracy` remakes analysis/accuracy.json (hours; `-- --share 0.5` with half the repeats); `-- --tracks 1,20 --frames 100 --x 0.25 --repeats 100`
 * prints a part of it and writes nothing.
 */
import { writeFileSync } from 'node:fs';
import { parseArgs } from 'node:util';
import { analyse, DEFAULT_SETTINGS, ENGINE_VERSION } from '../../analysis/analyse';
import { scenarioMaker, type Motion, type Scenario } from '../../analysis/simulate/scenario';
import type { AnalysisResult, Estimate, Verdict } from '../../analysis/types';

const MOTIONS: Readonly<Record<string, { motion: Motion; verdict: Verdict; several?: true }>> = {
  free: { motion: { kind: 'free' }, verdict: 'free' },
  'flow 0.1': { motion: { kind: 'flow', speed: 0.1 }, verdict: 'directed' },
  'flow 0.3': { motion: { kind: 'flow', speed: 0.3 }, verdict: 'directed' },
  'own 0.3': { motion: { kind: 'own', speed: 0.3 }, verdict: 'directed', several: true },
  'trap 0.1': { motion: { kind: 'trap', q: 0.1 }, verdict: 'confined' },
  'trap 0.02': { motion: { kind: 'trap', q: 0.02 }, verdict: 'confined' },
  'box 6': { motion: { kind: 'box', width: 6 }, verdict: 'confined' },
  'box 15': { motion: { kind: 'box', width: 15 }, verdict: 'confined' },
  'power 0.5': { motion: { kind: 'power', alpha: 0.5 }, verdict: 'anomalous' },
  'power 0.7': { motion: { kind: 'power', alpha: 0.7 }, verdict: 'anomalous' },
  'power 1.3': { motion: { kind: 'power', alpha: 1.3 }, verdict: 'anomalous' },
};

export interface AccuracyCell {
  readonly motion: string;
  readonly tracks: number;
  readonly frames: number;
  readonly x: number;
  readonly repeats: number;
  /** Percent of the repeats: the true verdict; another one than free or undecided; free. */
  readonly right: number;
  readonly wrong: number;
  readonly free: number;
  /** Departures from free diffusion that were seen but not told apart, percent. */
  readonly unclear: number;
  /** Percent of intervals that hold the truth, of the results that state the quantity; null where there is none. */
  readonly heldD: number | null;
  readonly heldOther: number | null;
}

const { values } = parseArgs({
  options: {
    tracks: { type: 'string', default: '1,20,200' },
    frames: { type: 'string', default: '50,100,300,1000' },
    x: { type: 'string', default: '0,0.25,1' },
    motion: { type: 'string' },
    repeats: { type: 'string' },
    share: { type: 'string', default: '1' },
    exposure: { type: 'string', default: '1' },
    missing: { type: 'string', default: '0' },
    spread: { type: 'string', default: '0' },
    stage: { type: 'string', default: '0' },
    write: { type: 'boolean', default: false },
  },
});
const list = (text: string) => text.split(',').map(Number);
const percent = (part: number, of: number) => (of === 0 ? null : Math.round((1000 * part) / of) / 10);
const holds = (found: Estimate | null, truth: number) =>
  found === null ? null : (found.lo ?? 0) <= truth && truth <= (found.hi ?? Infinity);

/** The quantity beside D that the motion has: its true value and where a result states it. */
function otherOf(motion: Motion): { truth: number; of: (result: AnalysisResult) => Estimate | null } | null {
  if (motion.kind === 'box') return { truth: motion.width, of: (result) => result.L };
  if (motion.kind === 'trap') return { truth: Math.sqrt(12 / motion.q), of: (result) => result.L };
  if (motion.kind === 'power') return { truth: motion.alpha, of: (result) => result.alpha };
  if (motion.kind === 'free') return { truth: 1, of: (result) => result.alpha };
  return null;
}

function measure(name: string, scenario: Scenario, repeats: number): AccuracyCell {
  const { motion, verdict } = MOTIONS[name]!;
  const make = scenarioMaker(scenario);
  const other = otherOf(motion);
  const counts = { right: 0, wrong: 0, free: 0, unclear: 0 };
  const held = { D: [0, 0], other: [0, 0] };
  for (let repeat = 0; repeat < repeats; repeat++) {
    const result = analyse([make(7_919 * repeat + 13 * scenario.frames + scenario.tracks)], DEFAULT_SETTINGS);
    if ('failed' in result) throw new Error(result.message);
    if (result.verdict === verdict) counts.right += 1;
    else if (!['free', 'undecided'].includes(result.verdict)) counts.wrong += 1;
    if (result.verdict === 'free') counts.free += 1;
    if (result.verdict === 'undecided' && result.sentence.includes('departs from free')) counts.unclear += 1;
    const inD = result.verdict === verdict && motion.kind !== 'power' ? holds(result.D, 1) : null;
    if (inD !== null) held.D = [held.D[0]! + Number(inD), held.D[1]! + 1];
    const inOther =
      other && (motion.kind === 'free' || result.verdict === verdict)
        ? holds(other.of(result), other.truth)
        : null;
    if (inOther !== null) held.other = [held.other[0]! + Number(inOther), held.other[1]! + 1];
  }
  const { tracks, frames, x } = scenario;
  return {
    motion: name,
    tracks,
    frames,
    x,
    repeats,
    right: percent(counts.right, repeats)!,
    wrong: percent(counts.wrong, repeats)!,
    free: percent(counts.free, repeats)!,
    unclear: percent(counts.unclear, repeats)!,
    heldD: percent(held.D[0]!, held.D[1]!),
    heldOther: percent(held.other[0]!, held.other[1]!),
  };
}

const cells: AccuracyCell[] = [];
for (const tracks of list(values.tracks)) {
  for (const frames of list(values.frames)) {
    for (const x of list(values.x)) {
      const names = values.motion ? values.motion.split(',') : Object.keys(MOTIONS);
      const row: string[] = [];
      for (const name of names) {
        if (!MOTIONS[name])
          throw new Error(`There is no motion "${name}"; there are ${Object.keys(MOTIONS).join(', ')}.`);
        if (MOTIONS[name].several && tracks === 1) continue;
        const repeats = Number(
          values.repeats ?? Math.ceil((tracks === 1 ? 400 : tracks < 100 ? 200 : 60) * Number(values.share)),
        );
        const cell = measure(
          name,
          {
            motion: MOTIONS[name].motion,
            tracks,
            frames,
            dims: 2,
            x,
            exposure: Number(values.exposure),
            missing: Number(values.missing),
            spreadOfD: Number(values.spread),
            stageD: Number(values.stage),
          },
          repeats,
        );
        cells.push(cell);
        row.push(
          `${name}: ${cell.right}/${cell.wrong}/${cell.free}/${cell.unclear} D ${cell.heldD ?? '–'} ${cell.heldOther ?? '–'}`,
        );
      }
      console.log(`${tracks}/${frames}/${x}  ${row.join(' | ')}`);
    }
  }
}
if (values.write) {
  const about =
    'Simulated data, two dimensions, full exposure, D = Δt = 1; x = σ²/(DΔt). right/wrong/free/unclear in percent; heldD, heldOther: percent of 95 % intervals of D and of the width or exponent that hold the truth. Remade by: npm run bench:accuracy';
  writeFileSync(
    new URL('../../analysis/accuracy.json', import.meta.url),
    `${JSON.stringify({ engine: ENGINE_VERSION, about, cells }, null, 2)}\n`,
  );
}
