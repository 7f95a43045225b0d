import { describe, expect, it } from 'vitest';
import { emptyDraft } from './draft';
import { changed, redone, startHistory, undone } from './draft-history';

const first = emptyDraft('2031-05-12T06:40:00-08:00');
const titled = (title: string) => ({ ...first, title });

describe('undo and redo of a draft', () => {
  it('goes back to what stood before and forward again', () => {
    const history = changed(startHistory(first), titled('a'), '', 0);
    expect(undone(history).present).toBe(first);
    expect(redone(undone(history)).present.title).toBe('a');
  });

  it('takes typing in one field as one step', () => {
    const typed = changed(changed(startHistory(first), titled('a'), 'title', 0), titled('ab'), 'title', 300);
    expect(undone(typed).present).toBe(first);
  });

  it('takes a later change of the same field as a step of its own', () => {
    const typed = changed(changed(startHistory(first), titled('a'), 'title', 0), titled('ab'), 'title', 10_000);
    expect(undone(typed).present.title).toBe('a');
  });

  it('forgets what was undone once something else is changed', () => {
    const history = changed(undone(changed(startHistory(first), titled('a'), '', 0)), titled('b'), '', 1);
    expect(redone(history).present.title).toBe('b');
  });
});
