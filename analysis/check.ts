/** Preconditions: a programmer's mistake throws at once, with the value. */

export function requireFinite(name: string, value: number): void {
  if (!Number.isFinite(value)) throw new RangeError(`${name} must be finite, not ${value}`);
}

export function requirePositive(name: string, value: number): void {
  if (!(value > 0 && Number.isFinite(value)))
    throw new RangeError(`${name} must be above zero, not ${value}`);
}

export function requireWholeFrom(name: string, value: number, least: number): void {
  if (!Number.isInteger(value) || value < least)
    throw new RangeError(`${name} must be a whole number from ${least}, not ${value}`);
}
