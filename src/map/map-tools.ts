import { createContext, useContext } from 'react';
import type { LonLat } from '../../shared/schemas/basics';

/** Which tool has the pointer: the page's own clicks, or the tape. */
export type MapTool = 'none' | 'measure';

export type MapState = {
  theme: 'day' | 'night';
  tool: MapTool;
  setTool(tool: MapTool): void;
  /** True while the map is worked by keyboard: the cross-hair shows and stands for the pointer. */
  byKeyboard: boolean;
};

export const MapStateContext = createContext<MapState>({ theme: 'day', tool: 'none', setTool: () => undefined, byKeyboard: false });
export const useMapState = (): MapState => useContext(MapStateContext);

export type PointerHandler = (position: LonLat | null) => void;
