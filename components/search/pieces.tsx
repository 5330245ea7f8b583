import type { TextPiece } from '@/db/inputs/search';

/** Text with what was found in it marked; a mark is underlined too, so that colour is not its only carrier. */
export function Pieces({ pieces }: { pieces: readonly TextPiece[] }) {
  return pieces.map((piece, at) =>
    piece.hit ? (
      <mark
        key={at}
        className="bg-transparent font-semibold text-ink underline decoration-malachite decoration-2 underline-offset-2"
      >
        {piece.text}
      </mark>
    ) : (
      <span key={at}>{piece.text}</span>
    ),
  );
}
