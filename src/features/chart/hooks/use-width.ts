import { useCallback, useState } from 'react';

/** Width of an element, followed as it changes: `const [ref, width] = useWidth(600)`. */
export function useWidth(first: number): [(element: Element | null) => (() => void) | undefined, number] {
  const [width, setWidth] = useState(first);
  const ref = useCallback((element: Element | null) => {
    if (!element) return undefined;
    const observer = new ResizeObserver(([entry]) => {
      if (entry) setWidth(Math.max(1, Math.round(entry.contentRect.width)));
    });
    observer.observe(element);
    return () => observer.disconnect();
  }, []);
  return [ref, width];
}
