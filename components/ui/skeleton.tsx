/** Ruled lines where text is about to stand. The wrapper that shows them says in words what is being loaded. */
export function Skeleton({ lines = 3 }: { lines?: number }) {
  return (
    <div aria-hidden className="space-y-4 py-2">
      {Array.from({ length: lines }, (_, line) => (
        <div
          key={line}
          className="h-3 animate-pulse rounded-sm bg-rule"
          style={{ width: `${[92, 78, 85, 64][line % 4]}%` }}
        />
      ))}
    </div>
  );
}
