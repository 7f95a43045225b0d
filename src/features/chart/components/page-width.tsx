import { useState, type KeyboardEvent, type PointerEvent } from 'react';

const KEY = 'downreach-page-width';
const NARROWEST = 300;
const WIDEST = 640;
const clamp = (px: number) => Math.min(WIDEST, Math.max(NARROWEST, Math.round(px)));

function kept(): number {
  try {
    return clamp(Number(localStorage.getItem(KEY)) || 380);
  } catch {
    return 380;
  }
}

/** Width of the ruled page, kept in this browser. */
export function usePageWidth() {
  const [width, setWidth] = useState(kept);
  const set = (px: number) => {
    setWidth(clamp(px));
    try {
      localStorage.setItem(KEY, String(clamp(px)));
    } catch {
      // Not kept then: the width holds until the page is left.
    }
  };
  return { width, set };
}

/** The edge between page and map: dragged, or moved by the arrow keys. */
export function PageEdge({ width, onWidth }: { width: number; onWidth: (px: number) => void }) {
  const drag = (event: PointerEvent<HTMLDivElement>) => {
    if (!event.currentTarget.hasPointerCapture(event.pointerId)) return;
    const left = event.currentTarget.parentElement?.getBoundingClientRect().left ?? 0;
    onWidth(event.clientX - left);
  };
  const press = (event: KeyboardEvent) => {
    const way = event.key === 'ArrowRight' ? 1 : event.key === 'ArrowLeft' ? -1 : 0;
    if (way === 0) return;
    event.preventDefault();
    onWidth(width + way * 20);
  };
  return (
    <div
      role="separator"
      aria-orientation="vertical"
      aria-label="Width of the page"
      aria-valuenow={width}
      aria-valuemin={NARROWEST}
      aria-valuemax={WIDEST}
      tabIndex={0}
      onPointerDown={(event) => event.currentTarget.setPointerCapture(event.pointerId)}
      onPointerMove={drag}
      onKeyDown={press}
      className="absolute inset-y-0 -right-1.5 z-10 w-3 cursor-col-resize touch-none max-md:hidden print:hidden"
    />
  );
}
