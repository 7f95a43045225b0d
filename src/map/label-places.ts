import type L from 'leaflet';
import type { PixelBox } from './mercator';
import { movedBox, overlapsBy, spreadPlates, type Push } from './plate-places';

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
      if (taken.some((other) => other !== mark.body && overlapsBy(box, other, 0))) continue;
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

const MARKS = ".leaflet-marker-icon:not(.is-crowded) > svg, .leaflet-marker-icon:not(.is-crowded) > .mark-label:not([data-side='none'])";
/** What floats over a map, in it or beside it on the same stage. */
const COVERS = '.map-toolbar, .map-foot > *, [data-covers-map]';

/** Boxes of all marks, shown labels and what floats over the map, measured from the corner of an element. */
export function markBoxes(map: L.Map, from: DOMRect): PixelBox[] {
  const stage = map.getContainer().closest('.district-map')?.parentElement;
  const drawn = [...(map.getPane('markerPane')?.querySelectorAll(MARKS) ?? []), ...(stage?.querySelectorAll(COVERS) ?? [])];
  return drawn.map((element) => {
    const box = element.getBoundingClientRect();
    return { left: box.left - from.left, right: box.right - from.left, top: box.top - from.top, bottom: box.bottom - from.top };
  });
}

type Seen = { element: HTMLElement; body: PixelBox; rank: number };

/** A station seen this much under something else is left out, px. */
const CROWDED_PX = 3;

function tidy(pane: HTMLElement): void {
  const elements = [...pane.querySelectorAll<HTMLElement>('.leaflet-marker-icon')];
  for (const element of elements) {
    push(element, { x: 0, y: 0 });
    element.classList.remove('is-crowded');
  }
  const marks = seenMarks(elements, pane.getBoundingClientRect());
  const of = (className: string) => marks.filter(({ element }) => element.classList.contains(className));
  const plates = of('receptor-mark');
  const pushes = spreadPlates(plates.map(({ body }) => body), of('release-mark').map(({ body }) => body));
  plates.forEach((plate, k) => {
    push(plate.element, pushes[k]!);
    plate.body = movedBox(plate.body, pushes[k]!);
  });
  const kept = [...of('release-mark'), ...plates];
  for (const station of of('station-mark')) {
    if (kept.some(({ body }) => overlapsBy(station.body, body, CROWDED_PX))) station.element.classList.add('is-crowded');
    else kept.push(station);
  }
  tidyWords(marks.filter(({ element }) => !element.classList.contains('is-crowded')));
}

function seenMarks(elements: readonly HTMLElement[], origin: DOMRect): Seen[] {
  const marks = elements.flatMap((element): Seen[] => {
    const drawing = element.querySelector('svg');
    if (!drawing || element.offsetWidth === 0) return [];
    const seen = drawing.getBoundingClientRect();
    const body = { left: seen.left - origin.left, top: seen.top - origin.top, right: seen.right - origin.left, bottom: seen.bottom - origin.top };
    return [{ element, body, rank: Number(element.style.zIndex) - body.top }];
  });
  return marks.sort((a, b) => b.rank - a.rank);
}

/** Moves what is drawn of a mark off its place and leads a thin line back to it. */
function push(element: HTMLElement, { x, y }: Push): void {
  element.classList.toggle('is-pushed', x !== 0 || y !== 0);
  element.style.setProperty('--push-x', `${x}px`);
  element.style.setProperty('--push-y', `${y}px`);
  element.style.setProperty('--push-far', `${Math.hypot(x, y)}px`);
  element.style.setProperty('--push-turn', `${Math.atan2(y, x)}rad`);
}

function tidyWords(marks: readonly Seen[]): void {
  const found = marks.flatMap(({ element, body }) => {
    const label = element.querySelector<HTMLElement>('.mark-label');
    return label && label.offsetWidth > 0 ? [{ label, body, labelWidth: label.offsetWidth, labelHeight: label.offsetHeight }] : [];
  });
  placeLabels(found).forEach((side, k) => {
    found[k]!.label.dataset['side'] = side ?? 'none';
  });
}
