import type { InputHTMLAttributes, Ref } from 'react';
import { classes, controlClasses } from './classes';

/** One line of text. Give it a label through `Field`. */
export function Input({
  className,
  ...rest
}: InputHTMLAttributes<HTMLInputElement> & { ref?: Ref<HTMLInputElement> }) {
  return <input {...rest} className={classes(controlClasses, className)} />;
}
