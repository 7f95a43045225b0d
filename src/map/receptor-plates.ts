import type { ReceptorAnswer } from '../../shared/schemas/estimate-result';
import type { ReceptorKind } from '../../shared/schemas/estimate';
import { escapeHtml } from './escape-html';

/** Kinds are told apart by outline and letter, never by colour. Outlines are drawn on a field from -16 to 16. */
export const receptorPlates: Record<ReceptorKind, { letter: string; name: string; outline: string }> = {
  intake: { letter: 'W', name: 'drinking-water intake', outline: 'M-14 -14H14V14H-14Z' },
  bathing: { letter: 'B', name: 'bathing water', outline: 'M0 -15A15 15 0 1 1 0 15A15 15 0 1 1 0 -15Z' },
  irrigation: { letter: 'I', name: 'irrigation offtake', outline: 'M-15 -13H15L9 14H-9Z' },
  industry: { letter: 'N', name: 'industrial intake', outline: 'M-8 -14H8L16 0L8 14H-8L-16 0Z' },
  hatchery: { letter: 'H', name: 'hatchery', outline: 'M0 -16L15 -3L9 14H-9L-15 -3Z' },
  'fish-farm': { letter: 'F', name: 'fish farm', outline: 'M0 -17L17 0L0 17L-17 0Z' },
  shellfish: { letter: 'S', name: 'shellfish water', outline: 'M-15 -4A15 11 0 0 1 15 -4L6 14H-6Z' },
  ecological: { letter: 'E', name: 'ecological site', outline: 'M0 -17L17 13H-17Z' },
  other: { letter: 'O', name: 'other receptor', outline: 'M-7 -15H7L15 -7V7L7 15H-7L-15 7V-7Z' },
};

/** How a plate is filled: filled may exceed, open is not predicted to, hatched cannot be estimated, plain has nothing to judge by. */
export type PlateState = 'filled' | 'open' | 'hatched' | 'plain';

export const plateStateOf = (answer: ReceptorAnswer | undefined): PlateState => {
  if (!answer || answer.verdict === 'no action value') return 'plain';
  return answer.verdict === 'may exceed' ? 'filled' : answer.verdict === 'cannot be estimated' ? 'hatched' : 'open';
};

export const plateStateWords: Record<PlateState, string> = { filled: 'may exceed', open: 'not predicted to exceed', hatched: 'cannot be estimated', plain: 'no action value' };

/** A plate as SVG: its outline, its number, and the letter of its kind on a tab below. */
export function plateSvg(kind: ReceptorKind, number: string, state: PlateState): string {
  const { letter, outline } = receptorPlates[kind];
  // The broad base of a triangle and the narrow foot of a fan ask for the number a little off the middle.
  const textY = kind === 'ecological' ? 10 : kind === 'shellfish' || kind === 'irrigation' ? 3 : 5;
  const hatch = state === 'hatched' ? `<g class="plate-hatch" clip-path="path('${outline}')"><path d="M-22 6L6 -22M-16 12L12 -16M-10 18L18 -10M-4 24L24 -4"/></g>` : '';
  return (
    `<svg class="plate plate-${state}" viewBox="-20 -20 40 48" width="40" height="48" aria-hidden="true"><path class="plate-halo" d="${outline}"/><path class="plate-ground" d="${outline}"/>${hatch}` +
    `<text class="plate-number" x="0" y="${textY}" text-anchor="middle">${escapeHtml(number)}</text>` +
    `<circle class="plate-tab" cx="0" cy="19" r="7"/><text class="plate-letter" x="0" y="22.5" text-anchor="middle">${letter}</text></svg>`
  );
}
