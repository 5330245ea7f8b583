import { simulateDataSet, toCsv } from '../../analysis/simulate/data-set';
import { scenarioMaker } from '../../analysis/simulate/scenario';
import { inUnits } from './demo-files';
import type { DemoEntry } from './demo-plan';

const still = { velocity: [0, 0], box: null } as const;

/** Motion that is not free, and a crowd of several kinds. */
export function otherEntries(): DemoEntry[] {
  return [
    {
      notebook: 'WEL',
      author: 'keita',
      daysAgo: 11,
      title: 'Half-micrometre beads in square wells of 3 µm',
      parts: [
        'Wells from the clean room, nominal width 3.0 µm, 5 µm deep. One bead a well; wells with two were left out at the microscope.',
        {
          file: {
            name: 'wells-3um.csv',
            text: toCsv(
              simulateDataSet({
                seed: 612,
                tracks: 24,
                frames: 200,
                field: 80,
                physics: () => ({
                  D: 0.86,
                  interval: 0.1,
                  exposure: 0.3,
                  sigma: 0.03,
                  velocity: [0, 0],
                  box: 2.5,
                }),
              }),
            ),
          },
          stated: { exposureFraction: '0.3' },
          caption: '0.50 µm beads in wells',
          settings: { geometry: 'box' },
        },
        'The free width is 3.0 µm less the bead’s 0.5 µm; the fit finds that. The next mask has wells of 6 µm.',
      ],
    },
    {
      notebook: 'WEL',
      author: 'tove',
      daysAgo: 7,
      title: 'Tracers in a soft gel',
      parts: [
        'Agarose 0.4 %, beads of 0.20 µm mixed in before it set. 20 frames per second for 15 s.',
        {
          file: {
            name: 'soft-gel.csv',
            text: toCsv(
              inUnits(
                scenarioMaker({
                  motion: { kind: 'power', alpha: 0.65 },
                  tracks: 22,
                  frames: 300,
                  dims: 2,
                  x: 0.1,
                  exposure: 0.5,
                })(650),
                { interval: 0.05, length: 0.19, field: 70 },
              ),
            ),
          },
          stated: { exposureFraction: '0.5' },
          caption: '0.20 µm tracers in agarose 0.4 %',
          settings: {},
        },
        'No single D describes this; the exponent is what to compare with the next concentration.',
      ],
    },
    {
      notebook: 'WEL',
      author: 'keita',
      daysAgo: 4,
      title: 'Clusters and single beads in one drop',
      parts: [
        'The old lot, not sonicated. Singles, clusters and some that stick to the glass, all in one field, all kept.',
        {
          file: { name: 'old-lot.csv', text: crowdFile() },
          stated: { exposureFraction: '0.4' },
          caption: 'Old lot, everything in the field',
          settings: { medium: 'water', temperature: 22 },
        },
        'Not one number but several. Sonicate and repeat; leave out what sticks, with that reason.',
      ],
    },
    {
      notebook: 'WEL',
      author: 'tove',
      daysAgo: 1,
      title: 'Beads that are carried apart',
      parts: [
        'Salt diffuses out of the small gel plug in the middle, and beads near it move away from it, each in its own direction.',
        {
          file: {
            name: 'around-the-plug.csv',
            text: toCsv(
              inUnits(
                scenarioMaker({
                  motion: { kind: 'own', speed: 0.4 },
                  tracks: 26,
                  frames: 100,
                  dims: 2,
                  x: 0.05,
                  exposure: 0.4,
                })(71),
                { interval: 0.05, length: 0.157, field: 90 },
              ),
            ),
          },
          stated: { exposureFraction: '0.4' },
          caption: '1.00 µm beads around a salt-laden plug',
          settings: { medium: 'water', temperature: 22 },
        },
        'To be repeated without salt, which should leave free diffusion only.',
      ],
    },
  ];
}

/** Singles, clusters and stuck beads, in this order. */
function crowdFile(): string {
  const kinds = [
    { tracks: 14, D: 0.46 },
    { tracks: 8, D: 0.15 },
    { tracks: 5, D: 1e-7 },
  ];
  const kindOf = (track: number) => {
    let at = track;
    for (const kind of kinds) {
      if (at < kind.tracks) return kind;
      at -= kind.tracks;
    }
    throw new RangeError(`no kind for track ${track}`);
  };
  return toCsv(
    simulateDataSet({
      seed: 90,
      tracks: kinds.reduce((sum, kind) => sum + kind.tracks, 0),
      frames: 120,
      field: 90,
      physics: (track) => ({ ...still, D: kindOf(track).D, interval: 0.05, exposure: 0.4, sigma: 0.03 }),
    }),
  );
}
