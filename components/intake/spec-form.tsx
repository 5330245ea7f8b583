'use client';

import { useState } from 'react';
import type { ColumnRoles, Inspection, LengthUnit, ReadingSpec, TimeUnit } from '@/analysis/intake/types';
import { Field } from '@/components/ui/field';
import { Input } from '@/components/ui/input';
import { Select } from '@/components/ui/select';
import { decimalText } from '@/db/inputs/reading-spec';

const PARTS: readonly [keyof ColumnRoles, string][] = [
  ['track', 'Track'],
  ['time', 'Time'],
  ['frame', 'Frame'],
  ['x', 'x'],
  ['y', 'y'],
  ['z', 'z'],
];
const LENGTHS: readonly [LengthUnit, string][] = [
  ['um', 'µm'],
  ['nm', 'nm'],
  ['mm', 'mm'],
  ['m', 'm'],
  ['px', 'pixels'],
];
const TIMES: readonly [TimeUnit, string][] = [
  ['s', 's'],
  ['ms', 'ms'],
  ['us', 'µs'],
  ['min', 'min'],
  ['h', 'h'],
];

/** What can be corrected about how a file is read, and what has to be stated because the file does not say it. */
export function SpecForm({
  inspection,
  spec,
  onChange,
}: {
  inspection: Inspection;
  spec: ReadingSpec;
  onChange: (spec: ReadingSpec) => void;
}) {
  const inPixels = [spec.units.x, spec.units.y, spec.units.z].includes('px');
  return (
    <div className="space-y-5">
      <div className="grid gap-4 sm:grid-cols-2">
        <DecimalField
          label="Frame interval"
          unit="s"
          required={spec.columns.frame !== null}
          hint={
            spec.columns.frame !== null
              ? 'The file counts frames, so this is needed.'
              : 'Empty: from the times in the file.'
          }
          value={spec.frameInterval}
          onChange={(frameInterval) => onChange({ ...spec, frameInterval })}
        />
        {inPixels ? (
          <DecimalField
            label="Pixel size"
            unit="µm"
            required
            hint="How many micrometres a pixel is in the sample."
            value={spec.pixelSize}
            onChange={(pixelSize) => onChange({ ...spec, pixelSize })}
          />
        ) : null}
        <ExposureFields spec={spec} onChange={onChange} />
      </div>
      <fieldset>
        <legend className="label font-semibold">Columns</legend>
        <div className="mt-2 grid grid-cols-2 gap-4 sm:grid-cols-3">
          {PARTS.map(([part, label]) => (
            <Field key={part} label={label}>
              {(control) => (
                <Select
                  {...control}
                  value={spec.columns[part] ?? ''}
                  onChange={({ target }) =>
                    onChange(withColumn(spec, part, target.value === '' ? null : Number(target.value)))
                  }
                >
                  {part === 'x' ? null : <option value="">none</option>}
                  {inspection.columns.map((column, at) => (
                    <option key={at} value={at}>
                      {column.name}
                    </option>
                  ))}
                </Select>
              )}
            </Field>
          ))}
          <Field label="Unit of position">
            {(control) => (
              <Select
                {...control}
                value={spec.units.x}
                onChange={({ target }) => onChange(withLength(spec, target.value as LengthUnit))}
              >
                {LENGTHS.map(([value, label]) => (
                  <option key={value} value={value}>
                    {label}
                  </option>
                ))}
              </Select>
            )}
          </Field>
          {spec.columns.time !== null ? (
            <Field label="Unit of time">
              {(control) => (
                <Select
                  {...control}
                  value={spec.units.time ?? 's'}
                  onChange={({ target }) =>
                    onChange({ ...spec, units: { ...spec.units, time: target.value as TimeUnit } })
                  }
                >
                  {TIMES.map(([value, label]) => (
                    <option key={value} value={value}>
                      {label}
                    </option>
                  ))}
                </Select>
              )}
            </Field>
          ) : null}
        </div>
      </fieldset>
    </div>
  );
}

/** A number kept as text, so that its digits stay as they were typed. Only a right one leaves the field. */
function DecimalField(props: {
  label: string;
  unit: string;
  hint: string;
  required?: boolean;
  value: string | null;
  onChange: (value: string | null) => void;
}) {
  const [text, setText] = useState(props.value ?? '');
  const trimmed = text.trim().replace(',', '.');
  const parsed = decimalText.safeParse(trimmed);
  const error = trimmed === '' || parsed.success ? undefined : parsed.error.issues[0]?.message;
  return (
    <Field label={props.label} unit={props.unit} hint={props.hint} error={error}>
      {(control) => (
        <Input
          {...control}
          inputMode="decimal"
          autoComplete="off"
          required={props.required}
          value={text}
          onChange={({ target }) => {
            setText(target.value);
            const next = target.value.trim().replace(',', '.');
            if (next === '') props.onChange(null);
            else if (decimalText.safeParse(next).success) props.onChange(next);
          }}
        />
      )}
    </Field>
  );
}

function ExposureFields({ spec, onChange }: { spec: ReadingSpec; onChange: (spec: ReadingSpec) => void }) {
  const kind = spec.exposure === null ? 'none' : 'seconds' in spec.exposure ? 'seconds' : 'fraction';
  const [chosen, setChosen] = useState<'none' | 'seconds' | 'fraction'>(kind);
  return (
    <>
      <Field label="Exposure of a frame" hint="D does not depend on it; the localisation error does.">
        {(control) => (
          <Select
            {...control}
            value={chosen}
            onChange={({ target }) => {
              const next = target.value as typeof chosen;
              setChosen(next);
              onChange({ ...spec, exposure: next === 'fraction' ? { fraction: '1' } : null });
            }}
          >
            <option value="none">not known</option>
            <option value="fraction">the whole frame interval</option>
            <option value="seconds">in seconds</option>
          </Select>
        )}
      </Field>
      {chosen === 'seconds' ? (
        <DecimalField
          label="Exposure"
          unit="s"
          hint="From the camera's settings."
          value={spec.exposure && 'seconds' in spec.exposure ? spec.exposure.seconds : null}
          onChange={(seconds) => onChange({ ...spec, exposure: seconds === null ? null : { seconds } })}
        />
      ) : null}
    </>
  );
}

/** One clock only: choosing a time column gives up the frame column, and the other way round. */
function withColumn(spec: ReadingSpec, part: keyof ColumnRoles, column: number | null): ReadingSpec {
  const columns = { ...spec.columns, [part]: column };
  const units = { ...spec.units };
  if (part === 'time' && column !== null) columns.frame = null;
  if (part === 'frame' && column !== null) columns.time = null;
  units.time = columns.time === null ? null : (units.time ?? 's');
  for (const axis of ['y', 'z'] as const)
    units[axis] = columns[axis] === null ? null : (units[axis] ?? units.x);
  return { ...spec, columns, units };
}

function withLength(spec: ReadingSpec, unit: LengthUnit): ReadingSpec {
  const { columns, units } = spec;
  return {
    ...spec,
    pixelSize: unit === 'px' ? spec.pixelSize : null,
    units: { ...units, x: unit, y: columns.y === null ? null : unit, z: columns.z === null ? null : unit },
  };
}
