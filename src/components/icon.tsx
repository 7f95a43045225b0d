const paths = {
  add: 'M10 4v12M4 10h12',
  close: 'M5 5l10 10M15 5L5 15',
  down: 'M5 8l5 5 5-5',
  right: 'M8 5l5 5-5 5',
  left: 'M12 5l-5 5 5 5',
  up: 'M5 12l5-5 5 5',
  search: 'M9 3.5a5.5 5.5 0 1 0 0 11 5.5 5.5 0 0 0 0-11zM13 13l4 4',
  day: 'M10 6.5a3.5 3.5 0 1 0 0 7 3.5 3.5 0 0 0 0-7zM10 1.5v2M10 16.5v2M1.5 10h2M16.5 10h2M4 4l1.4 1.4M14.6 14.6L16 16M16 4l-1.4 1.4M5.4 14.6L4 16',
  night: 'M16.5 12.2A7 7 0 0 1 7.8 3.5a7 7 0 1 0 8.7 8.7z',
  person: 'M10 3.5a3 3 0 1 0 0 6 3 3 0 0 0 0-6zM4 17c.4-3.6 2.8-5.5 6-5.5s5.6 1.9 6 5.5',
  places: 'M3 5h14M3 10h14M3 15h14',
  play: 'M6 4l10 6-10 6z',
  pause: 'M7 4v12M13 4v12',
  stop: 'M5 5h10v10H5z',
  back: 'M14 4v12L6 10zM5 4v12',
  forward: 'M6 4v12l8-6zM15 4v12',
  undo: 'M4 8h8a4.5 4.5 0 0 1 0 9H8M4 8l4-4M4 8l4 4',
  redo: 'M16 8H8a4.5 4.5 0 0 0 0 9h4M16 8l-4-4M16 8l-4 4',
  edit: 'M4 16l1-4 8.5-8.5 3 3L8 15z',
  check: 'M4 10.5l4 4 8-9',
  attention: 'M10 3l8 14H2zM10 8.5v4M10 14.5v.5',
  note: 'M10 2.5a7.5 7.5 0 1 0 0 15 7.5 7.5 0 0 0 0-15zM10 9v5M10 6v.5',
  print: 'M6 7V3h8v4M6 14H3V7h14v7h-3M6 12h8v5H6z',
  copy: 'M7 7h9v10H7zM4 13V3h9',
  mail: 'M3 5h14v10H3zM3 5.5l7 5.5 7-5.5',
  clock: 'M10 2.5a7.5 7.5 0 1 0 0 15 7.5 7.5 0 0 0 0-15zM10 5.5V10l3 2',
  pin: 'M10 18c-3.5-4.2-5.2-7-5.2-9.2a5.2 5.2 0 0 1 10.4 0C15.2 11 13.5 13.8 10 18zM10 7.2v3',
  measure: 'M3 13L13 3l4 4L7 17zM6 10l2 2M9 7l2 2',
  layers: 'M10 3l7 4-7 4-7-4zM3 11l7 4 7-4',
} as const;
export type IconName = keyof typeof paths;

/** Marks of our own, in one stroke weight. Decoration only: the words beside it carry the meaning. */
export function Icon({ name, className = 'size-5' }: { name: IconName; className?: string }) {
  return (
    <svg viewBox="0 0 20 20" className={`${className} shrink-0`} fill="none" stroke="currentColor" strokeWidth="1.5" strokeLinecap="round" strokeLinejoin="round" aria-hidden="true">
      <path d={paths[name]} />
    </svg>
  );
}
