import type { Check, Warning } from '@/analysis/types';
import { classes } from '@/components/ui/classes';

const LOOKS = {
  problem: { shape: '▲', word: 'Problem', colour: 'text-madder' },
  look: { shape: '◇', word: 'Look', colour: 'text-ochre' },
} as const;

/** What a careful colleague would remark, the grave first; each with a shape and a word, never by colour alone. */
export function WarningList({ remarks }: { remarks: readonly (Warning | Check)[] }) {
  const shown = remarks.flatMap(({ code, level, message }) =>
    level === 'fine' ? [] : [{ code, level, message }],
  );
  if (shown.length === 0) return null;
  const sorted = shown.sort((a, b) => Number(b.level === 'problem') - Number(a.level === 'problem'));
  return (
    <ul className="small mt-3 space-y-1.5" aria-label="Remarks on this result">
      {sorted.map((warning) => {
        const { shape, word, colour } = LOOKS[warning.level];
        return (
          <li key={warning.code + warning.message} className="flex gap-3">
            <span className={classes('w-20 shrink-0 font-semibold', colour)}>
              <span aria-hidden>{shape}</span> {word}
            </span>
            <span className="max-w-measure">{warning.message}</span>
          </li>
        );
      })}
    </ul>
  );
}
