import { createContext, useContext } from 'react';

/** Whether the entry is being read or written: the same fields serve both. */
export type EntryMode = 'read' | 'write';
export const EntryModeContext = createContext<EntryMode>('read');
export const useIsWriting = (): boolean => useContext(EntryModeContext) === 'write';
