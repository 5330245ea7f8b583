import { simulateDataSet, toCsv } from '../../analysis/simulate/data-set';
import type { WalkPhysics } from '../../analysis/simulate/walk';
import { expectedDiffusion } from '../../analysis/physics/stokes-einstein';
import { waterViscosity } from '../../analysis/physics/water';
import { scenarioMaker } from '../../analysis/simulate/scenario';
import { inUnits } from './demo-files';
import type { DemoEntry } from './demo-plan';

const still: Pick<WalkPhysics, 'velocity' | 'box'> = { velocity: [0, 0], box: null };

/** Beads of 1.0 µm in water at 25 °C diffuse as Stokes and Einstein say: 0.491 µm²/s. */
const beadD = expectedDiffusion(25, waterViscosity(25), 1.0);
const smallBeadD = expectedDiffusion(37, waterViscosity(37), 0.5);

/** Reference beads and vesicles. */
export function tracerEntries(): DemoEntry[] {
  return [
    {
      notebook: 'TRB',
      author: 'noor',
      daysAgo: 16,
      title: 'Reference beads in water, 25 °C',
      parts: [
        'First run on the inverted microscope after its objective was cleaned. Polystyrene beads, nominal diameter 1.00 µm, lot PS-2207, diluted 1 : 20 000 in filtered water. Chamber 120 µm deep, sealed; focus kept 40 µm above the glass.',
        'Temperature of the stage plate 25.0 ± 0.2 °C, read before and after. 40 beads followed for 200 frames at 20 frames per second, exposure 20 ms.',
        {
          file: {
            name: 'reference-beads-25C.csv',
            text: toCsv(
              simulateDataSet({
                seed: 2207,
                tracks: 40,
                frames: 200,
                field: 90,
                missing: 0.01,
                physics: () => ({ ...still, D: beadD, interval: 0.05, exposure: 0.4, sigma: 0.03 }),
              }),
            ),
          },
          stated: { exposureFraction: '0.4' },
          caption: 'Reference beads, 1.00 µm, water at 25.0 °C',
          settings: { medium: 'water', temperature: 25, particleDiameter: 1 },
        },
        'The size agrees with the label within its interval. This run is the reference for the days that follow.',
      ],
    },
    {
      notebook: 'TRB',
      author: 'keita',
      daysAgo: 12,
      title: 'Half-micrometre beads at 37 °C, positions in pixels',
      parts: [
        'Beads of 0.50 µm, lot PS-2231, on the heated stage (37 °C, objective heater on). The camera software wrote positions in pixels and counted frames; pixel size from the calibration slide: 0.107 µm.',
        'Caution: the stage heater and the laser of this set-up are covered by the room rules and the risk assessment at the door. Ask the trained staff before changing either.',
        {
          file: { name: 'beads-500nm-37C.csv', text: pixelFile() },
          stated: { frameInterval: '0.025', pixelSize: '0.107', exposureFraction: '1' },
          caption: '0.50 µm beads, water at 37 °C',
          settings: { medium: 'water', temperature: 37, particleDiameter: 0.5 },
        },
        'Faster than the reference beads, as it should be: half the size and warmer water.',
      ],
    },
    {
      notebook: 'TRB',
      author: 'noor',
      daysAgo: 5,
      title: 'A leaking chamber: all beads drift',
      parts: [
        'Same beads as the reference run. The chamber was closed in a hurry; after ten minutes everything moved slowly to the upper right. Kept the run, because the drift is steady.',
        {
          file: {
            name: 'leaking-chamber.csv',
            text: toCsv(
              simulateDataSet({
                seed: 518,
                tracks: 24,
                frames: 120,
                field: 90,
                physics: () => ({
                  ...still,
                  D: beadD,
                  interval: 0.05,
                  exposure: 0.4,
                  sigma: 0.03,
                  velocity: [0.9, 0.5],
                }),
              }),
            ),
          },
          stated: { exposureFraction: '0.4' },
          caption: 'Reference beads while the chamber leaks',
          settings: { medium: 'water', temperature: 25, particleDiameter: 1 },
        },
        'The drift was taken off before D was fitted, and D agrees with the reference. Whether the stage or the liquid moved cannot be told from these tracks; the dried corner of the seal suggests the liquid.',
      ],
    },
    {
      notebook: 'TRB',
      author: 'keita',
      daysAgo: 3,
      title: 'The stage lock was open',
      parts: [
        'Reference beads again. The lock of the stage had been left open, and every bead trembles in the same way from frame to frame; seen when two tracks were laid on each other.',
        {
          file: { name: 'open-stage-lock.csv', text: shakenFile() },
          stated: { exposureFraction: '0.4' },
          caption: 'Reference beads on a trembling stage',
          settings: { medium: 'water', temperature: 25, particleDiameter: 1 },
        },
        'What all beads share was taken off, and D is that of the reference run. The lock is on the list by the door now.',
      ],
    },
    {
      notebook: 'TRB',
      author: 'keita',
      daysAgo: 1,
      title: 'One vesicle, seen for three seconds',
      parts: [
        'A single lipid vesicle crossed the field before the lamp failed: 30 frames at 10 frames per second. Written down so that it is not lost; it will not carry a number.',
        {
          file: {
            name: 'single-vesicle.csv',
            text: toCsv(
              simulateDataSet({
                seed: 77,
                tracks: 1,
                frames: 30,
                physics: () => ({ ...still, D: 1.4, interval: 0.1, exposure: 0.5, sigma: 0.1 }),
              }),
            ),
          },
          stated: { exposureFraction: '0.5' },
          caption: 'One vesicle, 3 s',
          settings: { medium: 'water', temperature: 21 },
        },
        'Too short to say anything about the kind of motion. To be repeated with the new lamp.',
      ],
    },
  ];
}

/** A stage that wanders a little by itself, with every bead on it. */
function shakenFile(): string {
  const make = scenarioMaker({
    motion: { kind: 'free' },
    tracks: 16,
    frames: 160,
    dims: 2,
    x: 0.04,
    exposure: 0.4,
    stageD: 0.6,
  });
  return toCsv(inUnits(make(43), { interval: 0.05, length: Math.sqrt(beadD * 0.05), field: 90 }));
}

/** Positions in pixels with a frame column, semicolons and decimal commas: how some software in some countries writes. */
function pixelFile(): string {
  const pixel = 0.107;
  const interval = 0.025;
  const data = simulateDataSet({
    seed: 2231,
    tracks: 18,
    frames: 150,
    field: 100,
    physics: () => ({ ...still, D: smallBeadD, interval, exposure: 1, sigma: 0.035 }),
  });
  const comma = (value: number) => (value / pixel).toFixed(3).replace('.', ',');
  const rows = Array.from(data.track, (track, row) =>
    [
      data.trackIds[track],
      Math.round(data.time![row]! / interval),
      comma(data.axes[0]![row]!),
      comma(data.axes[1]![row]!),
    ].join(';'),
  );
  return `bead;frame;x (px);y (px)\n${rows.join('\n')}\n`;
}
