import { classes } from './classes';
import { fitWalk, PRODUCT_WALK } from './walk';

/**
 * The walk of some hexadecimal digits, in the colour of the text around it. Without `title` it is hidden from screen
 * readers, because the name it belongs to stands beside it.
 */
export function WalkMark({
  digits,
  size = 24,
  dot = false,
  title,
  className,
}: {
  digits: string;
  /** Side of the square, px. */
  size?: number;
  /** Ends in a solid dot, as the product's own mark does. */
  dot?: boolean;
  title?: string;
  className?: string;
}) {
  const stroke = dot ? 8 : Math.min(7, fitWalk(digits, 100, 8).step * 0.62);
  const { path, end } = fitWalk(digits, 100, dot ? 14 : 8);
  return (
    <svg
      viewBox="0 0 100 100"
      width={size}
      height={size}
      role={title ? 'img' : undefined}
      aria-label={title}
      aria-hidden={title ? undefined : true}
      className={classes('inline-block shrink-0 fill-none stroke-current', className)}
    >
      <path d={path} strokeWidth={stroke} strokeLinejoin="round" strokeLinecap="round" />
      {dot ? <circle cx={end[0]} cy={end[1]} r={12.5} className="fill-current stroke-none" /> : null}
    </svg>
  );
}

/** Motebook's mark. */
export function ProductMark({ size = 24, className }: { size?: number; className?: string }) {
  return <WalkMark digits={PRODUCT_WALK} size={size} dot className={className ?? ''} />;
}
