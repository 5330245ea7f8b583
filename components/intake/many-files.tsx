'use client';

import { Button } from '@/components/ui/button';
import { Dialog } from '@/components/ui/dialog';

/** Several files came at once: are they one measurement or several? */
export function ManyFiles({
  names,
  onChoose,
}: {
  names: readonly string[];
  onChoose: (together: boolean) => void;
}) {
  return (
    <Dialog
      open
      onOpenChange={(open) => {
        if (!open) onChoose(false);
      }}
      title={`${names.length} files were read`}
      description="Files of one measurement can be analysed as one ensemble; otherwise each gets a block of its own."
    >
      <ul className="small max-h-48 list-none overflow-y-auto text-muted">
        {names.map((name) => (
          <li key={name}>{name}</li>
        ))}
      </ul>
      <div className="mt-6 flex flex-wrap justify-end gap-3">
        <Button onClick={() => onChoose(true)}>One block for all</Button>
        <Button weight="primary" onClick={() => onChoose(false)}>
          One block each
        </Button>
      </div>
    </Dialog>
  );
}
