import table from '@/analysis/accuracy.json';

/** Motions that are shown, with what they are called here. */
const SHOWN = [
  ['free', 'free'],
  ['flow 0.3', 'flow'],
  ['own 0.3', 'own directions'],
  ['trap 0.1', 'well'],
  ['box 6', 'box'],
  ['power 0.5', 'α = 0.5'],
  ['power 0.7', 'α = 0.7'],
  ['power 1.3', 'α = 1.3'],
] as const;
const X = 0.25;

/** How often verdicts are right and intervals hold the truth: measured by simulation, kept with the code. */
export function AccuracyTable() {
  const cells = table.cells.filter((cell) => cell.x === X);
  const sizes = [...new Set(cells.map((cell) => `${cell.tracks}/${cell.frames}`))];
  const at = (size: string, motion: string) =>
    cells.find((cell) => `${cell.tracks}/${cell.frames}` === size && cell.motion === motion);
  return (
    <div className="overflow-x-auto">
      <table className="small mt-4 w-full min-w-[640px] border-y">
        <caption className="mb-2 text-left text-muted">
          Verdicts that are right, percent; in brackets those that are definite and wrong. Two dimensions, σ²
          = 0.25 DΔt, full exposure; speeds 0.3, well κ = 0.1, box 6, in units of D and Δt. Last column:
          intervals of D that hold the truth, of free data.
        </caption>
        <thead>
          <tr className="border-b">
            <th scope="col" className="label py-2 pr-3 text-left font-normal text-muted">
              Tracks × frames
            </th>
            {SHOWN.map(([motion, name]) => (
              <th key={motion} scope="col" className="label px-2 text-right font-normal text-muted">
                {name}
              </th>
            ))}
            <th scope="col" className="label pl-2 text-right font-normal text-muted">
              D held
            </th>
          </tr>
        </thead>
        <tbody>
          {sizes.map((size) => (
            <tr key={size} className="border-b last:border-b-0">
              <th scope="row" className="py-1.5 pr-3 text-left font-normal tabular-nums">
                {size.replace('/', ' × ')}
              </th>
              {SHOWN.map(([motion]) => {
                const cell = at(size, motion);
                return (
                  <td key={motion} className="px-2 text-right tabular-nums">
                    {cell ? (
                      <>
                        {Math.round(cell.right)}{' '}
                        <span className="text-muted">({Math.round(cell.wrong)})</span>
                      </>
                    ) : (
                      '–'
                    )}
                  </td>
                );
              })}
              <td className="pl-2 text-right tabular-nums">{at(size, 'free')?.heldD ?? '–'}</td>
            </tr>
          ))}
        </tbody>
      </table>
    </div>
  );
}

/** The engine that the table was measured with. */
export const measuredWith = table.engine;
