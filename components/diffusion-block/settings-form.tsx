'use client';

import type { ReactNode } from 'react';
import { Button } from '@/components/ui/button';
import { Field } from '@/components/ui/field';
import { Select } from '@/components/ui/select';
import type { BlockAttributes } from '@/db/inputs/block-settings';
import type { BlockNow } from './blocks-context';
import { FilesField } from './files-field';
import { NumberField } from './number-field';
import type { NumberSetting } from './parse-number';

interface FormProps {
  readonly block: BlockAttributes;
  readonly now: BlockNow;
  readonly editable: boolean;
  /** Each control writes one attribute, so that two people who change two of them at once both have their way. */
  readonly update: (change: Partial<BlockAttributes>) => void;
}

/** The settings of a block. Everybody sees them; those who may write change them for all. */
export function SettingsForm(props: FormProps) {
  const { block, editable, update } = props;
  const number = (
    setting: NumberSetting,
    label: string,
    rest: { unit?: string; hint?: string; off?: boolean } = {},
  ) => (
    <NumberField
      setting={setting}
      label={label}
      unit={rest.unit}
      hint={rest.hint}
      block={block}
      disabled={!editable || (rest.off ?? false)}
      onChange={(value) => update({ [setting]: value } as Partial<BlockAttributes>)}
    />
  );
  const byFraction = block.exposureSeconds === null;
  const byViscosity = block.medium === null;
  return (
    <div className="mt-2 space-y-5 border-t pt-4">
      <Group name="Files">
        <FilesField {...props} />
      </Group>
      <Group name="Tracks">
        <Choice
          label="Axes"
          disabled={!editable}
          value={String(block.dims)}
          options={[
            ['auto', 'all that were measured'],
            ['1', 'x only'],
            ['2', 'x and y'],
            ['3', 'x, y and z'],
          ]}
          onChange={(dims) => update({ dims: dims === 'auto' ? 'auto' : (Number(dims) as 1 | 2 | 3) })}
        />
        <Choice
          label="Common drift"
          disabled={!editable}
          value={block.drift}
          options={[
            ['auto', 'removed when significant'],
            ['remove', 'always removed'],
            ['keep', 'kept in'],
          ]}
          onChange={(drift) => update({ drift: drift as BlockAttributes['drift'] })}
        />
        {number('minTrackFrames', 'Shortest track', { unit: 'frames' })}
        <Excluded {...props} />
      </Group>
      <Group name="Exposure and localisation">
        {number('exposureSeconds', 'Exposure', { unit: 's', hint: 'Empty: as the file says.' })}
        {number('exposureFraction', 'or its part of the interval', {
          hint: byFraction ? '0 to 1. Empty: as the file says.' : 'Not used while seconds are given.',
          off: !byFraction,
        })}
        {number('sigma', 'Localisation error σ, if known', {
          unit: 'µm',
          hint: 'Empty: fitted from the data.',
        })}
      </Group>
      <Group name="Medium and particle">
        <Choice
          label="Medium"
          disabled={!editable}
          value={block.medium ?? ''}
          options={[
            ['', 'not named'],
            ['water', 'water'],
          ]}
          onChange={(medium) => update({ medium: medium === 'water' ? 'water' : null })}
        />
        {number('viscosity', 'Viscosity', {
          unit: 'mPa·s',
          hint: byViscosity
            ? 'At the temperature of the measurement.'
            : 'Not used while the medium is named.',
          off: !byViscosity,
        })}
        {number('temperature', 'Temperature', { unit: '°C', hint: 'Needed for a size or a viscosity.' })}
        {number('particleDiameter', 'Particle diameter', {
          unit: 'µm',
          hint: 'Hydrodynamic, if it is known.',
        })}
      </Group>
      <Group name="Straight line, shown for comparison">
        {number('fitLagFirst', 'First lag', { unit: 'frames', hint: 'Empty: 1.' })}
        {number('fitLagLast', 'Last lag', { unit: 'frames', hint: 'Empty: the most precise choice.' })}
      </Group>
    </div>
  );
}

function Group({ name, children }: { name: string; children: ReactNode }) {
  return (
    <fieldset className="min-w-0">
      <legend className="label mb-2 text-muted italic">{name}</legend>
      <div className="grid gap-x-6 gap-y-4 tab:grid-cols-2 wide:grid-cols-3">{children}</div>
    </fieldset>
  );
}

function Choice({
  label,
  value,
  options,
  disabled,
  onChange,
}: {
  label: string;
  value: string;
  /** Value and words of each. */
  options: readonly (readonly [string, string])[];
  disabled: boolean;
  onChange: (value: string) => void;
}) {
  return (
    <Field label={label}>
      {(control) => (
        <Select
          {...control}
          disabled={disabled}
          value={value}
          onChange={({ target }) => onChange(target.value)}
        >
          {options.map(([option, words]) => (
            <option key={option} value={option}>
              {words}
            </option>
          ))}
        </Select>
      )}
    </Field>
  );
}

/** Tracks that were left out by hand can be taken back in at once. */
function Excluded({ block, editable, update }: FormProps) {
  const count = block.excludedTracks.length;
  if (count === 0) return null;
  return (
    <div className="label space-y-1">
      <p className="font-semibold text-ink">Left out by hand</p>
      <p className="text-muted">{count === 1 ? 'One track' : `${count} tracks`}, each with its reason.</p>
      {editable ? (
        <Button size="small" onClick={() => update({ excludedTracks: [] })}>
          Take {count === 1 ? 'it' : 'them'} back in
        </Button>
      ) : null}
    </div>
  );
}
