import {
  driftError,
  framesForShape,
  shapePower,
  tracksForShape,
  type Motion,
} from '@/analysis/planner/power';
import { precisionOf, reducedError, tracksFor, type Plan } from '@/analysis/planner/precision';
import { chiSquareQuantile } from '@/analysis/statistics/chi-square';
import { noncentralityFor } from '@/analysis/statistics/noncentral';
import { DRIFT_LEVEL } from '@/analysis/planner/power';

/** One question about a plan, with its answer in words and numbers. */
export interface Answer {
  readonly question: string;
  readonly answer: string;
}

const POWER = 0.8;
const two = (value: number) => Number(value.toPrecision(2)).toString();
const percent = (share: number) =>
  share > 0.99 ? 'more than 99\u00a0%' : `${Math.round(100 * share)}\u00a0%`;
const tracks = (n: number) =>
  Number.isFinite(n) && n < 1e6
    ? `${n.toLocaleString('en')} ${n === 1 ? 'track' : 'tracks'}`
    : 'more tracks than anybody has';

/** How precisely D will be known. Relative standard error; a 95 % interval is about twice as wide on either side. */
export function precisionAnswers(plan: Plan): Answer[] {
  const { relative, sigma2 } = precisionOf(plan);
  const x = reducedError(plan);
  return [
    {
      question: 'How well will D be known?',
      answer: `To ${two(100 * relative)}\u00a0% (standard error); the 95 % interval reaches about ${two(100 * (Math.exp(1.96 * relative) - 1))}\u00a0% above and ${two(100 * (1 - Math.exp(-1.96 * relative)))}\u00a0% below.`,
    },
    {
      question: 'How many tracks for 10 %, for 5 %, for 2 %?',
      answer:
        [0.1, 0.05, 0.02].map((target) => tracksFor(target, plan).toLocaleString('en')).join(', ') +
        ', as long as these.',
    },
    {
      question: 'How well will the localisation error be known?',
      answer:
        plan.sigma > 0
          ? `To ${two((50 * sigma2) / plan.sigma ** 2)}\u00a0% of σ. σ²/(DΔt) is ${two(x)}; above 1 most of a displacement is error, and slower frames lose little.`
          : `σ below ${two(1000 * Math.sqrt(2 * sigma2))} nm cannot be told from none.`,
    },
  ];
}

/** The slowest common drift that is found in four cases of five, µm/s. */
export function smallestDrift(plan: Plan): number {
  const needed = noncentralityFor(plan.dims, chiSquareQuantile(plan.dims, DRIFT_LEVEL), POWER);
  return Math.sqrt(needed) * driftError(plan);
}

/** What departure from free diffusion will be seen. */
export function reachAnswers(plan: Plan): Answer[] {
  const duration = plan.frames * plan.interval;
  const spread = Math.sqrt(2 * plan.D * duration);
  const motions: [string, Motion][] = [
    ['an exponent α of 0.7', { alpha: 0.7 }],
    ['an exponent α of 0.5', { alpha: 0.5 }],
    ['an exponent α of 1.3', { alpha: 1.3 }],
    [`confinement to ${two(spread)} µm (what a track spreads to in its time)`, { width: spread }],
    [`confinement to ${two(spread / 3)} µm (a third of that)`, { width: spread / 3 }],
  ];
  return [
    {
      question: 'Which common drift will be seen?',
      answer: `${two(smallestDrift(plan))} µm/s in four cases of five.`,
    },
    ...motions.map(([words, motion]) => ({
      question: `Will ${words} be seen?`,
      answer: seen(plan, motion),
    })),
  ];
}

function seen(plan: Plan, motion: Motion): string {
  const power = shapePower(plan, motion);
  if (power >= POWER) return `Yes, in ${percent(power)} of cases.`;
  const frames = framesForShape(plan, motion);
  return `In ${percent(power)} of cases. For four of five: ${tracks(tracksForShape(plan, motion))} as long${frames === null ? '' : `, or tracks of ${frames.toLocaleString('en')} frames`}.`;
}
