import type L from 'leaflet';
import type { PixelBox } from './mercator';

const overlaps = (a: PixelBox, b: PixelBox): boolean => a.left < b.right && a.right > b.left && a.top < b.bottom && a.bottom > b.top;
const sides = ['right', 'left', 'below', 'above'] as const;
type Side = (typeof sides)[number];

/** A mark as seen: its drawn part and the size of its label, px on the map. */
export type Labelled = { body: PixelBox; labelWidth: number; labelHeight: number };

function labelBox({ body, labelWidth, labelHeight }: Labelled, side: Side): PixelBox {
  const middleX = (body.left + body.right) / 2;
  const middleY = (body.top + body.bottom) / 2;
  const left = side === 'right' ? body.right : side === 'left' ? body.left - labelWidth : middleX - labelWidth / 2;
  const top = side === 'below' ? body.bottom : side === 'above' ? body.top - labelHeight : middleY - labelHeight / 2;
  return { left, top, right: left + labelWidth, bottom: top + labelHeight };
}

/**
 * Chooses for each label, most important first, the first side where it covers neither another mark nor a label
 * already placed; null where there is none and the label is left out.
 */
export function placeLabels(marks: readonly Labelled[]): (Side | null)[] {
  const taken: PixelBox[] = marks.map((mark) => mark.body);
  return marks.map((mark) => {
    for (const side of sides) {
      const box = labelBox(mark, side);
      if (taken.some((other) => other !== mark.body && overlaps(box, other))) continue;
      taken.push(box);
      return side;
    }
    return null;
  });
}

const waiting = new WeakSet<L.Map>();

/** Places the labels of all marks on a map before the next paint; asked for often, done once. */
export function tidyLabels(map: L.Map): void {
  if (waiting.has(map)) return;
  waiting.add(map);
  requestAnimationFrame(() => {
    waiting.delete(map);
    const pane = map.getPane('markerPane');
    if (!pane) return;
    tidy(pane);
    map.fire(LABELS_PLACED);
  });
}

/** Fired on a map after the labels of its marks have been placed. */
export const LABELS_PLACED = 'labelsplaced';

/** Boxes of all marks and shown labels, measured from the corner of an element. */
export function markBoxes(map: L.Map, from: DOMRect): PixelBox[] {
  const drawn = map.getPane('markerPane')?.querySelectorAll<HTMLElement>(".leaflet-marker-icon > svg, .mark-label:not([data-side='none'])") ?? [];
  return [...drawn].map((element) => {
    const box = element.getBoundingClientRect();
    return { left: box.left - from.left, right: box.right - from.left, top: box.top - from.top, bottom: box.bottom - from.top };
  });
}

function tidy(pane: HTMLElement): void {
  const origin = pane.getBoundingClientRect();
  const found = [...pane.querySelectorAll<HTMLElement>('.mark-label')].flatMap((label) => {
    const mark = label.parentElement;
    const drawing = mark?.querySelector('svg');
    if (!mark || !drawing || label.offsetWidth === 0) return [];
    const seen = drawing.getBoundingClientRect();
    const body = { left: seen.left - origin.left, top: seen.top - origin.top, right: seen.right - origin.left, bottom: seen.bottom - origin.top };
    return [{ label, rank: Number(mark.style.zIndex) - body.top, body, labelWidth: label.offsetWidth, labelHeight: label.offsetHeight }];
  });
  found.sort((a, b) => b.rank - a.rank);
  placeLabels(found).forEach((side, k) => {
    found[k]!.label.dataset['side'] = side ?? 'none';
  });
}
