'use client';

import dynamic from 'next/dynamic';
import { useEffect, useRef, useState } from 'react';
import type { TopLevelSpec } from 'vega-lite';

// Plotting code is heavy: it is fetched when the first chart is about to be seen, never with the page.
const VegaChart = dynamic(() => import('./vega-chart'), { ssr: false });

/** Charts this far below the window are drawn already, so that a reader who scrolls finds them. */
const AHEAD = '600px';

/**
 * A chart that is drawn when it is about to be seen, or printed. Its height is kept from the start, so that nothing on the
 * page jumps.
 */
export function LazyChart({
  spec,
  label,
  heightPixels,
}: {
  spec: TopLevelSpec;
  label: string;
  heightPixels: number;
}) {
  const place = useRef<HTMLDivElement>(null);
  const [wanted, setWanted] = useState(false);
  useEffect(() => {
    if (wanted || !place.current) return;
    const show = () => setWanted(true);
    const observer = new IntersectionObserver(
      (entries) => entries.some((one) => one.isIntersecting) && show(),
      {
        rootMargin: AHEAD,
      },
    );
    observer.observe(place.current);
    window.addEventListener('beforeprint', show);
    return () => {
      observer.disconnect();
      window.removeEventListener('beforeprint', show);
    };
  }, [wanted]);
  return (
    <div ref={place} className="w-full overflow-hidden" style={{ height: heightPixels }}>
      {wanted ? <VegaChart spec={spec} label={label} /> : null}
    </div>
  );
}
