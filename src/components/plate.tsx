export type PlateShape = 'square' | 'circle' | 'triangle' | 'diamond' | 'hexagon' | 'pentagon' | 'shield' | 'octagon' | 'tag';

/** Outlines in a square of 28, one stroke weight. */
export const plateOutlines: Record<PlateShape, string> = {
  square: 'M3 3h22v22H3z',
  circle: 'M14 2a12 12 0 1 1 0 24 12 12 0 0 1 0-24z',
  triangle: 'M14 1l13 25H1z',
  diamond: 'M14 0l14 14-14 14L0 14z',
  hexagon: 'M7.5 2h13L27 14l-6.5 12h-13L1 14z',
  pentagon: 'M14 1l13 10-5 15H6L1 11z',
  shield: 'M3 2h22v13c0 6-5 9-11 12C8 24 3 21 3 15z',
  octagon: 'M9 2h10l7 7v10l-7 7H9l-7-7V9z',
  tag: 'M2 5h17l8 9-8 9H2z',
};

/**
 * A numbered plate. Filled: measured. Open: predicted. Kinds of receptor differ by shape and letter, not by colour.
 * The text is for the eye; give the row beside it the name in words.
 */
export function Plate({ text, shape = 'square', filled = false, className = 'size-7' }: { text: string; shape?: PlateShape; filled?: boolean; className?: string }) {
  return (
    <svg viewBox="-1 -1 30 30" className={`${className} inline-block shrink-0 overflow-visible align-middle`} aria-hidden="true">
      <path d={plateOutlines[shape]} className={filled ? 'fill-ink stroke-ink' : 'fill-sheet stroke-ink'} strokeWidth="1.5" strokeLinejoin="round" />
      <text x="14" y={shape === 'triangle' ? 22 : 18.5} textAnchor="middle" fontSize={text.length > 2 ? 9.5 : 13} className={`font-semibold ${filled ? 'fill-paper' : 'fill-ink'}`}>
        {text}
      </text>
    </svg>
  );
}
