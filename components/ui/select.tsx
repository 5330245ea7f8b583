import type { Ref, SelectHTMLAttributes } from 'react';
import { classes, controlClasses } from './classes';

/** The browser's own choice list: it works with every keyboard, screen reader and finger. Options are the children. */
export function Select({
  className,
  children,
  ...rest
}: SelectHTMLAttributes<HTMLSelectElement> & { ref?: Ref<HTMLSelectElement> }) {
  return (
    <span className="relative block">
      <select {...rest} className={classes(controlClasses, 'appearance-none pr-8', className)}>
        {children}
      </select>
      <svg
        aria-hidden
        viewBox="0 0 10 6"
        className="pointer-events-none absolute top-1/2 right-3 h-1.5 w-2.5 -translate-y-1/2 fill-none stroke-muted stroke-[1.5]"
      >
        <path d="M1 1l4 4 4-4" />
      </svg>
    </span>
  );
}
