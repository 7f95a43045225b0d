import { createContext, useContext } from 'react';
import type { FieldError } from '../../../../shared/problem';
import type { Draft } from '../model/draft';
import type { Registers } from '../model/draft-actions';
import { errorsAt } from '../model/build-document';
import type { ChangeDraft } from './use-draft';

/** What every panel of the ruled page works on. */
export type ChartWork = {
  draft: Draft;
  change: ChangeDraft;
  registers: Registers;
  /** UTC offset of the incident. */
  offset: string;
  errors: readonly FieldError[];
  isReadOnly: boolean;
  selectedReleaseId: string | null;
  selectRelease: (id: string | null) => void;
  /** A release in hand: its draft is solved at once, but only letting go changes the draft. Null: nothing in hand. */
  setInHand: (draft: Draft | null) => void;
  /** Waiting for a click on the map: a new release, or a new place for the one named. */
  placing: { moveId: string | null } | null;
  setPlacing: (placing: { moveId: string | null } | null) => void;
};

export const ChartContext = createContext<ChartWork | null>(null);

export function useChart(): ChartWork {
  const work = useContext(ChartContext);
  if (!work) throw new Error('Panels of the Chart stand inside its page');
  return work;
}

/** The message at a field, or inside it. */
export function useErrorAt(path: string): string | undefined {
  return errorsAt(useChart().errors, path);
}
