/** The text of a mail; addresses of this server can be followed, everything else is plain text. */
export function MailText({ text, origin }: { text: string; origin: string }) {
  const own = origin.replace(/\/+$/, '');
  return (
    <p className="small mt-3 break-words whitespace-pre-wrap">
      {text
        .trim()
        .split(/(https?:\/\/\S+)/)
        .map((part, i) =>
          part.startsWith(`${own}/`) ? (
            <a key={i} href={part} className="break-all text-malachite underline underline-offset-4">
              {part}
            </a>
          ) : (
            part
          ),
        )}
    </p>
  );
}
