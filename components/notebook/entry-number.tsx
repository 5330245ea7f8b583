/** An entry's number, "TRB 4": notebook code and running number, never parted. */
export function EntryNumber({ code, number }: { code: string; number: number }) {
  return (
    <span className="whitespace-nowrap tabular-nums">
      {code} {number}
    </span>
  );
}
