/** Control marks in one stroke weight on a 20 by 20 field. */
const paths = {
  plus: 'M10 4V16M4 10H16',
  minus: 'M4 10H16',
  fit: 'M4 8V4H8M12 4H16V8M16 12V16H12M8 16H4V12',
  measure: 'M3 13 13 3 17 7 7 17ZM6 10 8 12M8.5 7.5 10.5 9.5M11 5 13 7',
  goTo: 'M10 2V6M10 14V18M2 10H6M14 10H18M10 6A4 4 0 1 1 10 14A4 4 0 1 1 10 6',
} as const;
export type MapIconName = keyof typeof paths;

export function MapIcon({ name }: { name: MapIconName }) {
  return (
    <svg viewBox="0 0 20 20" width="20" height="20" fill="none" stroke="currentColor" strokeWidth="1.6" strokeLinecap="round" strokeLinejoin="round" aria-hidden="true">
      <path d={paths[name]} />
    </svg>
  );
}
