import type { Verdict } from '@/analysis/types';

/**
 * One small MSD curve for each verdict, all on the same axes: 16 units wide and high, origin at (2, 14). `curve` is the
 * MSD itself; `reference` is the straight line of free motion that it departs from; `dotted` says that the curve is not
 * settled; `open` is the centre of a ring at an open end.
 */
export interface VerdictCurve {
  readonly curve: string;
  readonly reference?: string;
  readonly dotted?: boolean;
  readonly open?: readonly [x: number, y: number];
}

export const VERDICT_AXES = 'M2 1.5V14H14.5';

export const verdictCurves: Readonly<Record<Verdict, VerdictCurve>> = {
  free: { curve: 'M2 14L13.5 2.5' },
  directed: { curve: 'M2 14C7 13.4 11 9.5 13 2' },
  confined: { curve: 'M2 14C3.4 7.2 5.4 5.6 8 5.6H14' },
  anomalous: { curve: 'M2 14C2.4 9.4 5.4 6.6 14 5.2', reference: 'M2 14L13 3' },
  undecided: { curve: 'M2 14L10.2 5.8', dotted: true, open: [12.2, 3.8] },
};

/** How a verdict is called in the colour tokens. */
export const verdictColours = {
  free: 'malachite',
  directed: 'cobalt',
  confined: 'plum',
  anomalous: 'ochre',
  undecided: 'slate',
} as const satisfies Record<Verdict, string>;
