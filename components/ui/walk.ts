/**
 * A walk drawn from hexadecimal digits: each digit is two steps on a square lattice, its high then its low two bits;
 * 0 goes right, 1 up, 2 left, 3 down. Two copies of one hash give the same picture, so they can be compared at a glance.
 * It is an aid to the eye, not a proof.
 */
export type Point = readonly [x: number, y: number];

const steps: readonly Point[] = [
  [1, 0],
  [0, 1],
  [-1, 0],
  [0, -1],
];

/**
 * Lattice points of the walk, y upwards, from the origin.
 * @param digits - hexadecimal, any case; hyphens (of a UUID) are skipped. n digits give 2n + 1 points.
 * @throws RangeError - another character is among the digits.
 */
export function walkPoints(digits: string): Point[] {
  const bare = digits.replaceAll('-', '');
  if (!/^[0-9a-f]*$/i.test(bare)) throw new RangeError(`not hexadecimal: "${digits}"`);
  let [x, y] = [0, 0];
  const points: Point[] = [[0, 0]];
  for (const digit of bare) {
    const bits = Number.parseInt(digit, 16);
    for (const turn of [bits >> 2, bits & 3]) {
      const [dx, dy] = steps[turn] as Point;
      x += dx;
      y += dy;
      points.push([x, y]);
    }
  }
  return points;
}

/** A walk fitted into a square: path data and the point where it ends, in the units of `size`, y downwards. */
export interface FittedWalk {
  readonly path: string;
  readonly end: Point;
  /** Length of one step. */
  readonly step: number;
}

/**
 * Fits a walk into a square of side `size`, centred, with `margin` free on each side.
 * A walk that goes nowhere (no digits) is a point in the middle.
 */
export function fitWalk(digits: string, size: number, margin: number): FittedWalk {
  const points = walkPoints(digits);
  const [xs, ys] = [points.map(([x]) => x), points.map(([, y]) => y)];
  const [left, right, low, high] = [Math.min(...xs), Math.max(...xs), Math.min(...ys), Math.max(...ys)];
  const step = (size - 2 * margin) / Math.max(right - left, high - low, 1);
  const place = ([x, y]: Point): Point => [
    round(size / 2 + (x - (left + right) / 2) * step),
    round(size / 2 - (y - (low + high) / 2) * step),
  ];
  const placed = points.map(place);
  return {
    path: placed.map(([x, y], index) => `${index === 0 ? 'M' : 'L'}${x} ${y}`).join(''),
    end: placed.at(-1) as Point,
    step: round(step),
  };
}

const round = (value: number): number => Math.round(value * 100) / 100;

/** The product's own walk: 1905 and 1908, the years in which the motion of small particles was explained and measured. */
export const PRODUCT_WALK = '19051908';
