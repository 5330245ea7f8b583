import type { AnalysisResult } from '@/analysis/types';
import { fixed, THIN_SPACE } from '@/components/ui/format-quantity';
import type { BlockAttributes } from '@/db/inputs/block-settings';

/** A number as it was stated, up to six digits, with a proper minus and its unit. */
function stated(value: number, unit: string): string {
  const rounded = Number(value.toPrecision(6));
  const decimals = String(rounded).split('.')[1]?.length ?? 0;
  const text = String(rounded).includes('e') ? String(rounded) : fixed(rounded, decimals);
  return unit ? `${text}${THIN_SPACE}${unit}` : text;
}

/**
 * A block's settings in one line: "2-D · lags 1–4 · drift removed when significant · exposure not stated".
 * @param result - the result of exactly these settings, for what they left to the data; null while there is none.
 */
export function describeSettings(block: BlockAttributes, result: AnalysisResult | null): string {
  const dims = block.dims === 'auto' ? result?.dims : block.dims;
  const parts = [
    dims === undefined ? 'all measured axes' : `${dims}-D`,
    describeLags(block, result),
    DRIFT[block.drift],
    block.minTrackFrames > 2 ? `tracks of ${block.minTrackFrames} frames or more` : null,
    describeExcluded(block.excludedTracks.length),
    block.sigma === null ? null : `σ = ${stated(block.sigma, 'µm')} given`,
    describeExposure(block, result),
    describeMedium(block),
    block.particleDiameter === null ? null : `particles of ${stated(block.particleDiameter, 'µm')}`,
  ];
  return parts.filter((part) => part !== null).join(' · ');
}

const DRIFT = {
  auto: 'drift removed when significant',
  remove: 'drift removed',
  keep: 'drift kept',
} as const;

/** The lags of the straight line that is shown for comparison. */
function describeLags(block: BlockAttributes, result: AnalysisResult | null): string | null {
  const first = result?.lineFit?.lagFirst ?? block.fitLagFirst;
  const last = result?.lineFit?.lagLast ?? block.fitLagLast;
  if (first !== null && last !== null) return `lags ${first}–${last}`;
  if (first !== null) return `lags from ${first}`;
  return last === null ? null : `lags up to ${last}`;
}

function describeExcluded(count: number): string | null {
  if (count === 0) return null;
  return count === 1 ? 'one track left out by hand' : `${count} tracks left out by hand`;
}

function describeExposure(block: BlockAttributes, result: AnalysisResult | null): string {
  const part = (fraction: number) => `exposure ${stated(fraction * 100, '%')} of the interval`;
  if (block.exposureSeconds !== null) return `exposure ${stated(block.exposureSeconds, 's')}`;
  if (block.exposureFraction !== null) return part(block.exposureFraction);
  if (!result) return 'exposure as the file says';
  return result.exposureStated ? part(result.exposureFraction) : 'exposure not stated';
}

function describeMedium(block: BlockAttributes): string | null {
  const temperature = block.temperature === null ? null : stated(block.temperature, '°C');
  const medium =
    block.medium ?? (block.viscosity === null ? null : `medium of ${stated(block.viscosity, 'mPa·s')}`);
  if (medium === null) return temperature;
  return temperature === null ? medium : `${medium} at ${temperature}`;
}
