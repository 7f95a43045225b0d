import type { Draft } from './draft';

/** A copy of what was typed, in this browser, until the server has confirmed it. */
export type KeptDraft = { draft: Draft; baseVersion: number; keptAtMs: number };

const keyOf = (scenarioId: string) => `downreach-draft-${scenarioId}`;

export function keepDraft(scenarioId: string, kept: KeptDraft): void {
  try {
    localStorage.setItem(keyOf(scenarioId), JSON.stringify(kept));
  } catch {
    // Full or forbidden storage: the draft still goes to the server, only the second copy is missing.
  }
}

export function readKeptDraft(scenarioId: string): KeptDraft | null {
  try {
    const text = localStorage.getItem(keyOf(scenarioId));
    return text ? (JSON.parse(text) as KeptDraft) : null;
  } catch {
    return null;
  }
}

export function dropKeptDraft(scenarioId: string): void {
  try {
    localStorage.removeItem(keyOf(scenarioId));
  } catch {
    // Nothing was kept then.
  }
}
