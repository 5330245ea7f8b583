import { expectedDiffusion } from '../../analysis/physics/stokes-einstein';
import { waterViscosity } from '../../analysis/physics/water';
import { simulateDataSet, toCsv } from '../../analysis/simulate/data-set';
import type { DemoBlock, DemoEntry } from './demo-plan';

/** Viscosities of glycerol–water by mass at 25 °C, mPa·s. Source: Cheng 2008, Ind. Eng. Chem. Res. 47:3285. */
const GLYCEROL = { '20': 1.52451, '40': 3.13722 } as const;

/** A run of 1.00 µm beads in a liquid of this viscosity, mPa·s, at this temperature, °C. */
function beadRun(
  seed: number,
  given: { name: string; caption: string; viscosity: number; temperature: number; water?: boolean },
): DemoBlock {
  const D = expectedDiffusion(given.temperature, given.viscosity, 1);
  return {
    file: {
      name: given.name,
      text: toCsv(
        simulateDataSet({
          seed,
          tracks: 25,
          frames: 120,
          field: 90,
          missing: 0.01,
          physics: () => ({ D, interval: 0.05, exposure: 0.4, sigma: 0.03, velocity: [0, 0], box: null }),
        }),
      ),
    },
    stated: { exposureFraction: '0.4' },
    caption: given.caption,
    settings: {
      temperature: given.temperature,
      particleDiameter: 1,
      ...(given.water ? { medium: 'water' } : {}),
    },
  };
}

/** Beads of a known size in liquids whose viscosity is asked for. */
export function viscosityEntries(): DemoEntry[] {
  return [
    {
      notebook: 'VIS',
      author: 'tove',
      daysAgo: 14,
      title: 'Glycerol 20 % and 40 % by mass, 25 °C',
      parts: [
        'Two mixtures weighed on the analytical balance, 20.0 % and 40.0 % glycerol by mass, beads of 1.00 µm from lot PS-2207. Twenty minutes on the stage before each run, so that beads and liquid have its temperature.',
        beadRun(310, {
          name: 'glycerol-20.csv',
          caption: '1.00 µm beads, glycerol 20 %, 25.0 °C',
          viscosity: GLYCEROL['20'],
          temperature: 25,
        }),
        beadRun(311, {
          name: 'glycerol-40.csv',
          caption: '1.00 µm beads, glycerol 40 %, 25.0 °C',
          viscosity: GLYCEROL['40'],
          temperature: 25,
        }),
        'Both apparent viscosities hold the published values of the mixtures (1.52 and 3.14 mPa·s) within their intervals. Caution: read the safety data sheet before handling what the beads are kept in, and wear what the room rules ask for.',
      ],
    },
    {
      notebook: 'VIS',
      author: 'tove',
      daysAgo: 9,
      title: 'Water from 20 to 37 °C: does the stage show its temperature?',
      parts: [
        'One chamber, three temperatures of the stage plate, half an hour between them. If the liquid has the plate’s temperature, the apparent size stays the same.',
        ...[20, 30, 37].map((temperature, at) =>
          beadRun(342 + at, {
            name: `water-${temperature}C.csv`,
            caption: `1.00 µm beads, water, plate at ${temperature} °C`,
            viscosity: waterViscosity(temperature),
            temperature,
            water: true,
          }),
        ),
        'The three sizes agree, so the plate’s thermometer may be trusted within about a kelvin.',
      ],
    },
    {
      notebook: 'VIS',
      author: 'tove',
      daysAgo: 2,
      title: 'Syrup of unknown strength',
      parts: [
        'The bottle has lost its label. Beads of 1.00 µm at 25 °C, same settings of the camera as for the glycerol series.',
        beadRun(330, {
          name: 'syrup.csv',
          caption: '1.00 µm beads in the unlabelled syrup, 25.0 °C',
          viscosity: 2.2,
          temperature: 25,
        }),
        'To be compared with the refractometer tomorrow.',
      ],
    },
  ];
}
