import type { ColumnRoles } from './types';
import { splitNameAndUnit } from './units';

/** Words of general English for each part. A name counts when it is one of them, alone or with "number", "id" and the like. */
const WORDS: Readonly<Record<keyof ColumnRoles, readonly string[]>> = {
  track: ['track', 'trajectory', 'particle', 'bead', 'molecule', 'object', 'path', 'vesicle', 'id'],
  time: ['time', 't', 'seconds', 'elapsed'],
  frame: ['frame', 'image', 'slice', 'index', 'step', 'f'],
  x: ['x', 'x position', 'position x', 'pos x', 'x coordinate', 'xpos'],
  y: ['y', 'y position', 'position y', 'pos y', 'y coordinate', 'ypos'],
  z: ['z', 'z position', 'position z', 'pos z', 'z coordinate', 'zpos'],
};
const FILLERS = ['id', 'no', 'nr', 'number', 'index', 'name', '#'];

/** "Track-ID" → "track id": lower case, one space between words. */
function normal(name: string): string {
  let out = '';
  for (const letter of name.toLowerCase())
    out += letter === '_' || letter === '-' || letter === '.' || letter === '#' ? ' ' : letter;
  return out.split(' ').filter(Boolean).join(' ');
}

function matches(name: string, words: readonly string[]): boolean {
  if (words.includes(name)) return true;
  const parts = name.split(' ');
  return parts.length === 2 && words.includes(parts[0]!) && FILLERS.includes(parts[1]!);
}

/** The parts that columns play, from their names; null where no name fits. Time is preferred to frames. */
export function rolesByName(headers: readonly string[]): Record<keyof ColumnRoles, number | null> {
  const names = headers.map((header) => normal(splitNameAndUnit(header).name));
  const taken = new Set<number>();
  const find = (role: keyof ColumnRoles): number | null => {
    for (const word of WORDS[role]) {
      const at = names.findIndex((name, i) => !taken.has(i) && matches(name, [word]));
      if (at < 0) continue;
      taken.add(at);
      return at;
    }
    return null;
  };
  const [x, y, z] = [find('x'), find('y'), find('z')];
  const frame = find('frame');
  return { x, y, z, frame, time: find('time'), track: find('track') };
}

/** The parts of columns without names, by their place and content; null when there are too few. */
export function rolesByPlace(
  sample: readonly (readonly number[])[],
  columns: number,
): Record<keyof ColumnRoles, number | null> | null {
  const none = { track: null, time: null, frame: null, x: null, y: null, z: null };
  const whole = (column: number) => sample.every((row) => Number.isInteger(row[column]));
  if (columns === 2) return { ...none, time: 0, x: 1 };
  if (columns === 3) return { ...none, ...(whole(0) ? { frame: 0 } : { time: 0 }), x: 1, y: 2 };
  if (columns < 4) return null;
  const clock = whole(0) && whole(1) ? { frame: 1 } : { time: 1 };
  return { ...none, track: 0, ...clock, x: 2, y: 3, z: columns === 5 ? 4 : null };
}
