/** Minimum and root of a function of one variable, without derivatives. */

export interface Minimum {
  readonly x: number;
  readonly value: number;
}

const GOLDEN = (3 - Math.sqrt(5)) / 2;

/**
 * Brent's minimisation in [a, b] (R. P. Brent, Algorithms for Minimization without Derivatives, 1973, chapter 5; from
 * memory). Finds a local minimum; `guess` inside the bracket is where it begins.
 */
export function minimise(
  f: (x: number) => number,
  a: number,
  b: number,
  options: { guess?: number; tolerance?: number } = {},
): Minimum {
  const tolerance = options.tolerance ?? 1e-9;
  let x = options.guess ?? a + GOLDEN * (b - a);
  let w = x;
  let v = x;
  let fx = f(x);
  let fw = fx;
  let fv = fx;
  let step = 0;
  let before = 0;
  for (let i = 0; i < 120; i++) {
    const middle = (a + b) / 2;
    const near = tolerance * Math.abs(x) + 1e-14;
    if (Math.abs(x - middle) <= 2 * near - (b - a) / 2) break;
    let p = 0;
    let q = 0;
    if (Math.abs(before) > near) {
      const r = (x - w) * (fx - fv);
      q = (x - v) * (fx - fw);
      p = (x - v) * q - (x - w) * r;
      q = 2 * (q - r);
      if (q > 0) p = -p;
      q = Math.abs(q);
    }
    if (
      Math.abs(before) > near &&
      Math.abs(p) < Math.abs(0.5 * q * before) &&
      p > q * (a - x) &&
      p < q * (b - x)
    ) {
      before = step;
      step = p / q;
      const u = x + step;
      if (u - a < 2 * near || b - u < 2 * near) step = x < middle ? near : -near;
    } else {
      before = x < middle ? b - x : a - x;
      step = GOLDEN * before;
    }
    const u = Math.abs(step) >= near ? x + step : x + (step > 0 ? near : -near);
    const fu = f(u);
    if (fu <= fx) {
      if (u < x) b = x;
      else a = x;
      [v, w, x] = [w, x, u];
      [fv, fw, fx] = [fw, fx, fu];
    } else {
      if (u < x) a = u;
      else b = u;
      if (fu <= fw || w === x) {
        [v, w] = [w, u];
        [fv, fw] = [fw, fu];
      } else if (fu <= fv || v === x || v === w) {
        v = u;
        fv = fu;
      }
    }
  }
  return { x, value: fx };
}

/** The best point of a grid, polished between its neighbours: for functions that may have more than one dip. */
export function minimiseOnGrid(f: (x: number) => number, grid: readonly number[]): Minimum {
  let best = 0;
  const values = grid.map(f);
  for (let i = 1; i < grid.length; i++) if (values[i]! < values[best]!) best = i;
  const left = grid[Math.max(0, best - 1)]!;
  const right = grid[Math.min(grid.length - 1, best + 1)]!;
  const polished = minimise(f, left, right, { guess: grid[best]! });
  return polished.value <= values[best]! ? polished : { x: grid[best]!, value: values[best]! };
}

/**
 * Root of f between a and b, where f has opposite signs; bisection with secant steps (Illinois variant of regula falsi).
 * @param ends - f(a) and f(b) when they are known already.
 * @throws RangeError when the signs are equal.
 */
export function findRoot(
  f: (x: number) => number,
  a: number,
  b: number,
  tolerance = 1e-9,
  ends?: readonly [number, number],
): number {
  let [fa, fb] = ends ?? [f(a), f(b)];
  if (fa === 0) return a;
  if (fb === 0) return b;
  if (fa * fb > 0) throw new RangeError(`no sign change between ${a} and ${b}`);
  let side = 0;
  for (let i = 0; i < 200; i++) {
    if (Math.abs(b - a) <= tolerance * Math.max(Math.abs(a), Math.abs(b), 1e-300)) break;
    let c = (a * fb - b * fa) / (fb - fa);
    if (!(c > Math.min(a, b) && c < Math.max(a, b)) || i % 12 === 11) c = (a + b) / 2;
    const fc = f(c);
    if (fc === 0) return c;
    if (fa * fc > 0) {
      a = c;
      fa = fc;
      if (side === -1) fb /= 2;
      side = -1;
    } else {
      b = c;
      fb = fc;
      if (side === 1) fa /= 2;
      side = 1;
    }
  }
  return (a + b) / 2;
}
