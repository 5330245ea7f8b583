import { CHI2_95_ONE } from '@/analysis/estimators/profile-interval';
import { PRESENT_FROM } from '@/analysis/input/common-motion';
import { LONGEST_FILLED } from '@/analysis/input/fill-gaps';
import { BOLTZMANN } from '@/analysis/physics/stokes-einstein';
import { WATER_HIGHEST, WATER_LOWEST } from '@/analysis/physics/water';
import {
  ALPHA_ENDS,
  CLEARLY_BETTER,
  DEPARTS_FROM,
  ENDS_EXCLUDED,
  MOTION_RESOLVED,
  PRECISE_TO,
} from '@/analysis/verdict/decide';
import { CHI2_975 } from '@/analysis/verdict/free-fit';

/** A part of a section: a paragraph, in which `$…$` is a formula, or a formula of its own line. */
export type Part = string | { readonly tex: string };

export interface Section {
  readonly id: string;
  readonly title: string;
  readonly parts: readonly Part[];
  readonly sources: readonly string[];
}

const mantissa = (BOLTZMANN * 1e23).toFixed(6);

/** How each number comes about, with its limits. Thresholds stand here as the code has them, never typed anew. */
export const sections: readonly Section[] = [
  {
    id: 'input',
    title: 'What is read, and what is left out',
    parts: [
      'Positions are taken track by track, sorted by time, in micrometres and seconds. Track names are text: “007” and “7” are two tracks. The frame interval is the median difference of times within tracks, refined over whole tracks.',
      'A row without a readable position is a gap. The same row twice counts once; two different positions of one particle in one frame are both dropped, never averaged. An axis that never changes was not measured. Everything left out is counted, with its reason, under the result.',
      'A track is cut where a displacement is too long to belong to the same particle: longer than chance allows once in a hundred data sets, against a scale taken from the median.',
    ],
    sources: ['The rules are this product’s own; the limits were checked by simulation.'],
  },
  {
    id: 'msd',
    title: 'Mean squared displacement',
    parts: [
      'All pairs of positions of one track that lie exactly $n$ frames apart count, each with the same weight:',
      {
        tex: '\\mathrm{MSD}(n) = \\frac{1}{K_n}\\sum_{m}\\sum_{j} \\lvert \\mathbf r_m(j+n)-\\mathbf r_m(j)\\rvert^2',
      },
      'The points of one curve share most of their displacements, so they move together: a smooth curve is no evidence. The bars are the exact standard errors under the fitted model times 1.96.',
      'The straight line through the first lags is shown for comparison only. The number of lags is the one that makes its slope most precise; more lags make it worse.',
    ],
    sources: [
      'Qian, Sheetz & Elson 1991, Biophys. J. 60:910.',
      'Michalet & Berglund 2012, Phys. Rev. E 85:061916 (number of lags).',
    ],
  },
  {
    id: 'localisation',
    title: 'Localisation error and exposure',
    parts: [
      'A camera sees each position with an error $\\sigma$ per axis and smears it over the exposure, a part $e$ of the frame interval. In $d$ dimensions free diffusion then gives',
      { tex: '\\mathrm{MSD}(n) = 2d\\,D\\,\\Delta t\\left(n-\\tfrac{e}{3}\\right) + 2d\\,\\sigma^2 .' },
      'The curve may start below zero when it is drawn backwards; that is right when the exposure is long and the error small, and $\\sigma^2$ is left free in sign. $D$ does not depend on the exposure, $\\sigma$ does. A negative $\\sigma^2$ beyond chance is a warning that the exposure or the frame interval is wrong.',
    ],
    sources: [
      'Goulian & Simon 2000, Biophys. J. 79:2188.',
      'Savin & Doyle 2005, Biophys. J. 88:623.',
      'Berglund 2010, Phys. Rev. E 82:011917.',
    ],
  },
  {
    id: 'd',
    title: 'D and its interval',
    parts: [
      'The displacements of each run of frames are transformed into sines. For free diffusion with error and blur these are independent, with variances that are known but for $D$ and $\\sigma^2$:',
      {
        tex: '\\lambda_k = 2D\\Delta t + \\left(\\sigma^2-\\tfrac{e}{3}D\\Delta t\\right)\\left(2-2\\cos\\tfrac{\\pi k}{N+1}\\right)',
      },
      { tex: '-2\\ln L = \\sum_k n_k\\ln\\lambda_k + \\frac{S_k}{\\lambda_k}' },
      `$D$ and $\\sigma^2$ are those that make the likelihood largest, over all tracks and axes at once. The interval holds every $D$ for which $-2\\ln L$, with $\\sigma^2$ at its best, rises by at most ${CHI2_95_ONE.toFixed(3)}: 95 % of such intervals hold the truth. A drift that all tracks share is taken off when it is beyond chance (statistic above ${CHI2_975.map((one) => one.toFixed(2)).join(', ')} for 1, 2, 3 axes).`,
      'Tracks of two points cannot tell $D$ from $\\sigma$: then $\\sigma$ is what was stated, or zero with a warning.',
    ],
    sources: ['Berglund 2010, Phys. Rev. E 82:011917.', 'Michalet & Berglund 2012, Phys. Rev. E 85:061916.'],
  },
  {
    id: 'verdict',
    title: 'The verdict',
    parts: [
      'Free diffusion is held against three other kinds of motion, each fitted to the same transformed displacements: a spread that grows as another power of time ($\\alpha$ from 0.05 to 1.95), confinement, and, for several tracks, directions of their own. Each has one number more than free diffusion.',
      `Beyond ${DEPARTS_FROM.one} (one track) or ${DEPARTS_FROM.several} (several) in $-2\\ln L$ the motion departs from free diffusion. The best model gives the verdict when it beats the second by ${CLEARLY_BETTER}; otherwise the data are undecided between the two. Statistics are divided by how much the displacements scatter beyond one $D$, so that a mixture is not called something else.`,
      `Data without departure are called free only when they exclude $\\alpha \\le ${ALPHA_ENDS[0]}$ and $\\alpha \\ge ${ALPHA_ENDS[1]}$ (${ENDS_EXCLUDED} in $-2\\ln L$ at either end) and know $D$ to better than ${PRECISE_TO * 100} %. Few data are therefore undecided, not free. Below ${MOTION_RESOLVED} against a particle that does not move at all, no motion is resolved.`,
      `Short gaps (up to ${LONGEST_FILLED} frames) are bridged for the verdict, and for nothing else, by a draw from the fitted free model that agrees with what was measured on either side. Motion that all tracks share from frame to frame (more than ${PRESENT_FROM} standard errors, three tracks at least) is taken off first; its mean stays, because a stage that drifts and a flow look the same.`,
      'One short track hardly separates persistent motion from a drift, or hindered motion from a wall. The verdict then names both.',
    ],
    sources: [
      'Mandelbrot & Van Ness 1968, SIAM Rev. 10:422; Backlund, Joyner & Moerner 2015, Phys. Rev. E 91:062716 (anomalous motion with blur).',
      'Sykulski et al. 2019, Biometrika 106:251 (likelihood of transformed series).',
      'Schuirmann 1987, J. Pharmacokinet. Biopharm. 15:657 (equivalence).',
      'Thresholds, the bridging of gaps and the shared motion: this product’s own, calibrated by simulation (table below).',
    ],
  },
  {
    id: 'confinement',
    title: 'The size of a confinement',
    parts: [
      'Confined positions have a standard deviation $s$ per axis. A box is $\\sqrt{12}\\,s$ wide, a circle has the radius $2s$, a sphere $\\sqrt5\\,s$: choose the shape in the settings.',
      'Walls and a harmonic well of the same size give almost the same curve, but $D$ a fifth apart. The positions decide: they fill the room between walls evenly (excess kurtosis $-1.2$) and gather in the middle of a well ($0$). Where there are too few to tell, walls are stated and the intervals span both.',
      'For free data the widest box that is excluded is stated: with it the fit would be worse by more than the 95 % limit.',
    ],
    sources: [
      'Kusumi, Sako & Yamamoto 1993, Biophys. J. 65:2021.',
      'Bickel 2007, Physica A 377:24 (circle and sphere).',
    ],
  },
  {
    id: 'size',
    title: 'Size and viscosity',
    parts: [
      { tex: 'D = \\frac{k_\\mathrm{B}T}{3\\pi\\eta d}' },
      `with $k_\\mathrm{B} = ${mantissa}\\times10^{-23}\\,\\mathrm{J/K}$, for a sphere of hydrodynamic diameter $d$ far from walls and neighbours. The viscosity of water is known from $${WATER_LOWEST}$ to $${WATER_HIGHEST}\\,^\\circ\\mathrm C$ within 1 %. Intervals are carried over by their ends, because $1/D$ is skewed.`,
      'Near a wall a particle is slower than this, a rough or charged one too; a degree of temperature changes the size by 2 to 3 %.',
    ],
    sources: [
      'Einstein 1905, Ann. Phys. 322:549.',
      'Pátek et al. 2009, J. Phys. Chem. Ref. Data 38:21 (water; the IAPWS correlation).',
    ],
  },
];

/** What each remark under a result means, beyond its own sentence. */
export const remarks: Readonly<Record<string, string>> = {
  'exposure-not-stated': 'State the exposure in the block’s settings; σ changes, D does not.',
  'exposure-too-long': 'The exposure or the frame interval is mistyped, or one of them is in milliseconds.',
  'two-point-tracks': 'With one displacement a track has no second one to compare with.',
  'few-displacements': 'Below about twenty displacements an interval spans a factor of two.',
  'sigma-negative': 'See “Localisation error and exposure”. Persistent motion does this too.',
  'spread-too-wide': 'Fourth powers of the displacements are larger than one D allows.',
  mislinks: 'See “What is read”. Link the positions with a smaller search radius.',
  'shared-motion': 'See “The verdict”. Lock the stage, or correct the film before tracking.',
  'persistence-or-drift': 'One track has one direction: it cannot tell why.',
  'drift-ambiguous': 'Follow a particle that sticks to the glass to tell a stage from a flow.',
  'drift-kept': 'Set “drift” back to “removed when significant” unless the drift is what you measure.',
  'water-range': 'State a viscosity instead.',
  'excluded-track-missing': 'The file was replaced, or the track has another name.',
  'axis-constant': 'A column of zeros is often the unused third axis.',
  'dims-reduced': 'Fewer axes change than were asked for.',
  'irregular-intervals': 'Cameras that skip frames do this; export frame numbers.',
  'unreadable-positions': 'The list of rows can be saved from the file’s reading.',
  duplicates: 'Two exports of the same film were joined.',
  conflicts: 'Track numbers were used twice, perhaps in two films.',
  'one-d': 'Each track’s spread is held against the common fit.',
  stuck: 'A track is stuck when its likelihood is as good without any motion.',
  halves: 'The first and the second half of every run, each with its own D.',
  'short-tracks': 'Fast particles leave the focus first.',
  'pixel-locking': 'Rayleigh test of the positions within a pixel (Fisher 1993).',
};
