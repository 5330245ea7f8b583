import type { ReactNode } from 'react';
import { VerdictMark } from '@/components/ui/verdict-glyph';
import { RANGE_MODES, VERDICTS, type MeasurementFilters, type RangeMode } from '@/db/inputs/measurement';
import { Button } from '@/components/ui/button';

/** A notebook that one may read, as it is offered here. */
export interface NotebookChoice {
  readonly id: string;
  readonly code: string;
  readonly title: string;
}

const line = 'small inline-flex min-h-10 items-center gap-2 max-desk:min-h-11 pointer-coarse:min-h-11';
const box = 'size-4 shrink-0 accent-malachite';

/** Puts an item in or takes it out, in the order of `all`: the same choice always reads the same. */
function toggled<T>(chosen: readonly T[], item: T, all: readonly T[]): T[] {
  const next = chosen.includes(item) ? chosen.filter((one) => one !== item) : [...chosen, item];
  const place = (one: T) => (all.includes(one) ? all.indexOf(one) : all.length);
  return next.sort((a, b) => place(a) - place(b));
}

function Check({
  checked,
  onChange,
  children,
}: {
  checked: boolean;
  onChange: () => void;
  children: ReactNode;
}) {
  return (
    <label className={line}>
      <input type="checkbox" className={box} checked={checked} onChange={onChange} />
      {children}
    </label>
  );
}

/** Several verdicts; none chosen means every one. */
export function VerdictChoice({
  chosen,
  onChange,
}: {
  chosen: MeasurementFilters['verdict'];
  onChange: (verdict: MeasurementFilters['verdict']) => void;
}) {
  return (
    <div className="flex flex-wrap gap-x-6">
      {VERDICTS.map((verdict) => (
        <Check
          key={verdict}
          checked={chosen.includes(verdict)}
          onChange={() => onChange(toggled(chosen, verdict, VERDICTS))}
        >
          <VerdictMark verdict={verdict} />
        </Check>
      ))}
    </div>
  );
}

const modeWords: Readonly<Record<RangeMode, string>> = {
  overlaps: 'interval overlaps the range',
  inside: 'value inside the range',
};

export function RangeModeChoice({
  mode,
  onChange,
}: {
  mode: RangeMode;
  onChange: (mode: RangeMode) => void;
}) {
  return (
    <div role="radiogroup" aria-label="What must meet the range" className="flex flex-wrap gap-x-6">
      {RANGE_MODES.map((one) => (
        <label key={one} className={line}>
          <input
            type="radio"
            name="range"
            className={box}
            checked={mode === one}
            onChange={() => onChange(one)}
          />
          {modeWords[one]}
        </label>
      ))}
    </div>
  );
}

/** Several notebooks; none chosen means every one that one may read. */
export function NotebooksChoice({
  notebooks,
  chosen,
  onChange,
}: {
  notebooks: readonly NotebookChoice[];
  chosen: readonly string[];
  onChange: (notebook: string[]) => void;
}) {
  const ids = notebooks.map(({ id }) => id);
  const foreign = chosen.filter((id) => !ids.includes(id));
  return (
    <div>
      <div className="-my-1 flex max-h-56 flex-wrap gap-x-6 overflow-y-auto py-1">
        {notebooks.map(({ id, code, title }) => (
          <Check key={id} checked={chosen.includes(id)} onChange={() => onChange(toggled(chosen, id, ids))}>
            <span>
              <span className="text-muted">{code}</span> {title}
            </span>
          </Check>
        ))}
      </div>
      {foreign.length > 0 ? (
        <p className="label mt-1 text-muted">
          The address also names {foreign.length === 1 ? 'a notebook' : `${foreign.length} notebooks`} that
          you may not read.{' '}
          <Button
            weight="quiet"
            size="small"
            onClick={() => onChange(chosen.filter((id) => ids.includes(id)))}
          >
            Leave {foreign.length === 1 ? 'it' : 'them'} out
          </Button>
        </p>
      ) : null}
    </div>
  );
}
