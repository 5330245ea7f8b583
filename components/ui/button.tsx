import type { ButtonHTMLAttributes, Ref } from 'react';
import { classes } from './classes';

type Weight = 'primary' | 'plain' | 'quiet' | 'danger';

const looks: Record<Weight, string> = {
  primary: 'bg-malachite text-on-malachite border-malachite hover:opacity-90',
  plain: 'bg-page text-ink border-control hover:border-ink',
  quiet: 'border-transparent text-malachite hover:underline underline-offset-4 decoration-1',
  danger: 'bg-page text-madder border-madder hover:bg-madder hover:text-page',
};

/** Classes of a button, for links that should look like one. */
export function buttonClasses(weight: Weight = 'plain', size: 'normal' | 'small' = 'normal'): string {
  return classes(
    'inline-flex items-center justify-center gap-2 rounded-sm border font-sans font-semibold whitespace-nowrap',
    'transition-colors select-none disabled:opacity-60 aria-disabled:opacity-60',
    size === 'normal'
      ? 'min-h-9 px-4 text-small max-desk:min-h-11 pointer-coarse:min-h-11'
      : 'min-h-7 px-2 text-label max-desk:min-h-11 pointer-coarse:min-h-11',
    looks[weight],
  );
}

/** A button is a verb. While `busy` it keeps its width and its focus, says so to a reader, and does nothing when pressed. */
export function Button({
  weight = 'plain',
  size = 'normal',
  busy = false,
  type = 'button',
  className,
  onClick,
  ...rest
}: ButtonHTMLAttributes<HTMLButtonElement> & {
  weight?: Weight;
  size?: 'normal' | 'small';
  busy?: boolean;
  ref?: Ref<HTMLButtonElement>;
}) {
  return (
    <button
      {...rest}
      type={busy ? 'button' : type}
      aria-busy={busy || undefined}
      aria-disabled={busy || undefined}
      onClick={busy ? (event) => event.preventDefault() : onClick}
      className={classes(buttonClasses(weight, size), className)}
    />
  );
}
