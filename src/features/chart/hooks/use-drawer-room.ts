import { useSyncExternalStore } from 'react';

const subscribe = (listener: () => void) => {
  window.addEventListener('resize', listener);
  return () => window.removeEventListener('resize', listener);
};
/** The drawer's height, as its class says it: 28 % of the window, at least 13 rem and at most 26. */
const drawerPx = () => Math.round(Math.min(416, Math.max(208, 0.28 * window.innerHeight)));
const PADDING_PX = 32;

/** Height in which a drawing stands in the drawer without being scrolled to, px. */
export const useDrawerRoom = (besidesPx: number, leastPx: number): number => Math.max(leastPx, useSyncExternalStore(subscribe, drawerPx) - PADDING_PX - besidesPx);
