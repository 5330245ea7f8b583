'use client';

import { useMemo } from 'react';
import type { Plan } from '@/analysis/planner/precision';
import { bestResidence, separation } from '@/analysis/planner/separation';
import { precisionAnswers, reachAnswers, type Answer } from './answers';
import { NumberGrid } from './number-grid';
import { useNumbers, type NumberRule } from './number-inputs';

const above = (value: number) => value > 0;
const PLAN: Readonly<
  Record<'D' | 'tracks' | 'frames' | 'interval' | 'exposure' | 'sigma' | 'dims', NumberRule>
> = {
  D: { label: 'Expected D', unit: 'µm²/s', fits: above, wants: 'A number above zero, such as 0.5.' },
  tracks: {
    label: 'Tracks',
    unit: '',
    fits: (n) => Number.isInteger(n) && n >= 1 && n <= 1e6,
    wants: 'A whole number from 1.',
  },
  frames: {
    label: 'Frames of each',
    unit: '',
    fits: (n) => Number.isInteger(n) && n >= 3 && n <= 10_000,
    wants: 'A whole number from 3 to 10,000.',
  },
  interval: { label: 'Frame interval', unit: 's', fits: above, wants: 'A time above zero.' },
  exposure: {
    label: 'Exposure',
    unit: 'of the interval',
    fits: (e) => e >= 0 && e <= 1,
    wants: 'A part from 0 to 1.',
  },
  sigma: {
    label: 'Localisation error',
    unit: 'µm',
    fits: (s) => s >= 0,
    wants: 'Zero or a length above it.',
  },
  dims: { label: 'Axes', unit: '', fits: (d) => [1, 2, 3].includes(d), wants: '1, 2 or 3.' },
};
const CHANNEL: Readonly<Record<'fast' | 'slow' | 'width' | 'time', NumberRule>> = {
  fast: { label: 'D of the faster', unit: 'µm²/s', fits: above, wants: 'A number above zero.' },
  slow: { label: 'D of the slower', unit: 'µm²/s', fits: above, wants: 'A number above zero.' },
  width: { label: 'Width of the channel', unit: 'µm', fits: above, wants: 'A length above zero.' },
  time: { label: 'Time in the channel', unit: 's', fits: (t) => t >= 0, wants: 'Zero or a time above it.' },
};

/** How much to measure, answered while one types. Everything is computed here, by the engine that will judge the data. */
export function Planner() {
  const plan = useNumbers(PLAN, {
    D: '0.5',
    tracks: '20',
    frames: '100',
    interval: '0.05',
    exposure: '0.5',
    sigma: '0.03',
    dims: '2',
  });
  const channel = useNumbers(CHANNEL, { fast: '400', slow: '60', width: '200', time: '10' });
  // As a text, because the values are new at every turn even when they are the same.
  const key = JSON.stringify(plan.values);
  const answers = useMemo(() => {
    const values = JSON.parse(key) as Plan | null;
    return values ? [...precisionAnswers(values), ...reachAnswers(values)] : null;
  }, [key]);
  return (
    <>
      <section aria-labelledby="measuring" className="mt-8">
        <h2 id="measuring" className="text-heading">
          Measuring D
        </h2>
        <div className="mt-4">
          <NumberGrid rules={PLAN} texts={plan.texts} errors={plan.errors} onChange={plan.set} />
        </div>
        <Answers answers={answers} />
      </section>
      <section aria-labelledby="parting" className="mt-14">
        <h2 id="parting" className="text-heading">
          Parting two species
        </h2>
        <p className="small mt-2 max-w-measure text-muted">
          Two streams side by side in a flat channel, the particles in one half. What has diffused into the
          other by the outlet? The speed is taken as even across the width.
        </p>
        <div className="mt-4">
          <NumberGrid rules={CHANNEL} texts={channel.texts} errors={channel.errors} onChange={channel.set} />
        </div>
        <Answers answers={channel.values ? partingAnswers(channel.values) : null} />
      </section>
    </>
  );
}

function partingAnswers({
  fast,
  slow,
  width,
  time,
}: Record<'fast' | 'slow' | 'width' | 'time', number>): Answer[] {
  const percent = (share: number) => `${(100 * share).toPrecision(3)} %`;
  if (fast <= slow)
    return [{ question: 'Which is the faster?', answer: 'The first D must be the larger one.' }];
  const parted = separation(fast, slow, { width, time });
  const best = bestResidence(fast, slow, { width });
  return [
    { question: 'How much of the faster has crossed?', answer: percent(parted.fast) },
    { question: 'How much of the slower?', answer: percent(parted.slow) },
    {
      question: 'How pure is what crossed, of equal parts?',
      answer: `${percent(parted.purity)} of it is the faster species.`,
    },
    { question: 'When do the two differ most?', answer: `After ${Number(best.toPrecision(2))} s.` },
  ];
}

function Answers({ answers }: { answers: readonly Answer[] | null }) {
  if (answers === null)
    return (
      <p role="status" className="small mt-6 text-muted">
        Nothing is computed until every number can be read.
      </p>
    );
  return (
    <dl aria-live="polite" className="mt-6 border-t">
      {answers.map(({ question, answer }) => (
        <div key={question} className="grid gap-x-6 gap-y-0.5 border-b py-2.5 tab:grid-cols-[19rem_1fr]">
          <dt className="small text-muted">{question}</dt>
          <dd className="max-w-measure tabular-nums">{answer}</dd>
        </div>
      ))}
    </dl>
  );
}
