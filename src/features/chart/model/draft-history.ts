import type { Draft } from './draft';

/** Undo and redo. Changes of the same field in quick succession count as one. */
export type History = { past: Draft[]; present: Draft; future: Draft[]; lastKey: string; lastAtMs: number };

const SAME_ACT_MS = 1_500;
const KEPT = 200;

export const startHistory = (present: Draft): History => ({ past: [], present, future: [], lastKey: '', lastAtMs: 0 });

export function changed(history: History, next: Draft, key: string, atMs: number): History {
  if (next === history.present) return history;
  const continues = key !== '' && key === history.lastKey && atMs - history.lastAtMs < SAME_ACT_MS && history.past.length > 0;
  return {
    past: continues ? history.past : [...history.past, history.present].slice(-KEPT),
    present: next,
    future: [],
    lastKey: key,
    lastAtMs: atMs,
  };
}

export function undone(history: History): History {
  const before = history.past[history.past.length - 1];
  return before ? { past: history.past.slice(0, -1), present: before, future: [history.present, ...history.future], lastKey: '', lastAtMs: 0 } : history;
}

export function redone(history: History): History {
  const after = history.future[0];
  return after ? { past: [...history.past, history.present], present: after, future: history.future.slice(1), lastKey: '', lastAtMs: 0 } : history;
}
