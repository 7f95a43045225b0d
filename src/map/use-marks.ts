import L from 'leaflet';
import { useEffect, useRef } from 'react';
import { useMap, useMapEvents } from 'react-leaflet';
import type { LonLat } from '../../shared/schemas/basics';
import { tidyLabels } from './label-places';

export const latLngOf = ([lon, lat]: LonLat): L.LatLngTuple => [lat, lon];

/** What one mark looks like and says; equal marks are left alone, so that focus and drags survive a new render. */
export type Mark = {
  id: string;
  position: LonLat;
  html: string;
  /** Width and height of the mark, px, and where in it its position lies. */
  size: [number, number];
  anchor: [number, number];
  className: string;
  label: string;
  pressed?: boolean;
  draggable?: boolean;
  zIndexOffset?: number;
};

export type MarkEvents = {
  onPress?: (id: string) => void;
  /** While dragged and at its end; answers where the mark is to stand. Null leaves it in hand while dragged and puts it back at the end. */
  onDrag?: (id: string, position: LonLat, ended: boolean) => LonLat | null;
  onKey?: (id: string, event: KeyboardEvent) => void;
};

type Standing = { marker: L.Marker; mark: Mark; isDragged: boolean };

/** Keeps Leaflet markers in step with a list of marks. Marks with `onPress` are buttons for keyboard and screen reader. */
export function useMarks(marks: readonly Mark[], events: MarkEvents): void {
  const map = useMap();
  const standing = useRef(new Map<string, Standing>());
  const latest = useRef(events);
  useEffect(() => {
    latest.current = events;
  });

  useEffect(() => {
    const all = standing.current;
    const wanted = new Set(marks.map((mark) => mark.id));
    for (const [id, { marker }] of all) {
      if (wanted.has(id)) continue;
      marker.remove();
      all.delete(id);
    }
    for (const mark of marks) {
      const known = all.get(mark.id);
      if (known) refresh(known, mark);
      else all.set(mark.id, place(map, mark, latest));
    }
    tidyLabels(map);
  }, [map, marks]);
  useMapEvents({ zoomend: () => tidyLabels(map) });

  useEffect(() => {
    const all = standing.current;
    return () => {
      for (const { marker } of all.values()) marker.remove();
      all.clear();
    };
  }, [map]);
}

function place(map: L.Map, mark: Mark, latest: { current: MarkEvents }): Standing {
  const presses = latest.current.onPress !== undefined || mark.draggable === true;
  const marker = L.marker(latLngOf(mark.position), { icon: iconOf(mark), keyboard: presses, interactive: presses, draggable: mark.draggable ?? false, zIndexOffset: mark.zIndexOffset ?? 0, riseOnHover: true, autoPan: true });
  const held: Standing = { marker, mark, isDragged: false };
  marker.addTo(map);
  marker.on('click', () => latest.current.onPress?.(mark.id));
  const moved = (ended: boolean) => {
    const at = marker.getLatLng();
    const answer = latest.current.onDrag?.(mark.id, [at.lng, at.lat], ended);
    if (!ended) {
      if (answer) marker.setLatLng(latLngOf(answer));
    } else {
      held.isDragged = false;
      marker.setLatLng(latLngOf(answer ?? held.mark.position));
      tidyLabels(map);
    }
  };
  marker.on('dragstart', () => void (held.isDragged = true));
  marker.on('drag', () => moved(false));
  marker.on('dragend', () => moved(true));
  dress(marker, mark);
  marker.getElement()?.addEventListener('keydown', (event) => {
    if ((event.key === 'Enter' || event.key === ' ') && latest.current.onPress) {
      event.preventDefault();
      event.stopPropagation();
      latest.current.onPress(mark.id);
    } else latest.current.onKey?.(mark.id, event);
  });
  return held;
}

function refresh(held: Standing, mark: Mark): void {
  const before = held.mark;
  held.mark = mark;
  const element = held.marker.getElement();
  if (element && before.html !== mark.html) element.innerHTML = mark.html;
  if (element && before.className !== mark.className) {
    element.classList.remove(...before.className.split(' '));
    element.classList.add(...mark.className.split(' '));
  }
  if (!held.isDragged && (before.position[0] !== mark.position[0] || before.position[1] !== mark.position[1])) held.marker.setLatLng(latLngOf(mark.position));
  held.marker.setZIndexOffset(mark.zIndexOffset ?? 0);
  dress(held.marker, mark);
}

const iconOf = (mark: Mark) => L.divIcon({ className: mark.className, html: mark.html, iconSize: mark.size, iconAnchor: mark.anchor });

function dress(marker: L.Marker, mark: Mark): void {
  const element = marker.getElement();
  if (!element) return;
  element.setAttribute('aria-label', mark.label);
  if (marker.options.keyboard) {
    element.setAttribute('role', 'button');
    if (mark.pressed !== undefined) element.setAttribute('aria-pressed', String(mark.pressed));
  } else element.setAttribute('role', 'img');
}
