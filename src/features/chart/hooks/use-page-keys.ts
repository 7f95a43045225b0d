import { useEffect } from 'react';

/** Ctrl+Z and Ctrl+Y (or Ctrl+Shift+Z) for the draft, Ctrl+S to save; in a text field the browser's own undo comes first. */
export function usePageKeys({ undo, redo, save }: { undo: () => void; redo: () => void; save: () => void }): void {
  useEffect(() => {
    const press = (event: KeyboardEvent) => {
      if (!(event.ctrlKey || event.metaKey) || event.altKey) return;
      const key = event.key.toLowerCase();
      if (key === 's') save();
      else if (isTyping(event.target)) return;
      else if (key === 'z' && !event.shiftKey) undo();
      else if (key === 'y' || (key === 'z' && event.shiftKey)) redo();
      else return;
      event.preventDefault();
    };
    window.addEventListener('keydown', press);
    return () => window.removeEventListener('keydown', press);
  }, [undo, redo, save]);
}

const isTyping = (target: EventTarget | null): boolean => target instanceof HTMLTextAreaElement || (target instanceof HTMLInputElement && !['checkbox', 'radio'].includes(target.type));
