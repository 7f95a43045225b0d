import { useMemo } from 'react';
import type { EstimateReceptor } from '../../shared/schemas/estimate';
import type { ReceptorAnswer } from '../../shared/schemas/estimate-result';
import { escapeHtml } from './escape-html';
import { plateStateOf, plateStateWords, plateSvg, receptorPlates } from './receptor-plates';
import { useMarks, type Mark } from './use-marks';

type Props = {
  receptors: readonly EstimateReceptor[];
  answers?: readonly ReceptorAnswer[];
  selectedId?: string | null;
  onSelect?: (receptorId: string) => void;
  /** Number on each plate by receptor id, for example its place by arrival; by default its place in the list. */
  numbers?: ReadonlyMap<string, number>;
};

/** Receptors as numbered plates with their codes. */
export function ReceptorLayer({ receptors, answers = [], selectedId = null, onSelect, numbers }: Props) {
  const marks = useMemo<Mark[]>(() => {
    const answerOf = new Map(answers.map((answer) => [answer.receptorId, answer]));
    return receptors.map((receptor, k) => {
      const answer = answerOf.get(receptor.id);
      const state = plateStateOf(answer);
      const number = String(numbers?.get(receptor.id) ?? k + 1);
      const isSelected = receptor.id === selectedId;
      const called = receptor.code === '' ? receptor.name : receptor.code;
      return {
        id: receptor.id,
        position: receptor.position,
        html: `${plateSvg(receptor.kind, number, state)}<span class="mark-label">${escapeHtml(called)}</span>`,
        size: [40, 48],
        anchor: [20, 20],
        className: `receptor-mark${isSelected ? ' is-selected' : ''}`,
        label: `${number}: ${receptor.code === '' ? '' : `${receptor.code} `}${receptor.name}, ${receptorPlates[receptor.kind].name}${answer ? `, ${plateStateWords[state]}` : ''}`,
        pressed: isSelected,
        zIndexOffset: isSelected ? 1_000 : state === 'filled' ? 200 : 100,
      };
    });
  }, [receptors, answers, selectedId, numbers]);
  useMarks(marks, { onPress: onSelect });
  return null;
}
