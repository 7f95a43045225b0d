import L from 'leaflet';
import { useCallback } from 'react';

/** Keeps clicks, drags and the wheel over a control from reaching the map below it. */
export const useShield = () =>
  useCallback((element: HTMLElement | null) => {
    if (!element) return;
    L.DomEvent.disableClickPropagation(element);
    L.DomEvent.disableScrollPropagation(element);
  }, []);
