import { useEffect } from 'react';
import { useMap } from 'react-leaflet';

const FAR = 11;
const VERY_FAR = 10;

/** Lets the style sheet draw marks smaller and leave some out when the map is seen from afar. */
export function ZoomClasses() {
  const map = useMap();
  useEffect(() => {
    const mark = () => {
      map.getContainer().classList.toggle('map-is-far', map.getZoom() <= FAR);
      map.getContainer().classList.toggle('map-is-very-far', map.getZoom() <= VERY_FAR);
    };
    mark();
    map.on('zoomend', mark);
    return () => void map.off('zoomend', mark);
  }, [map]);
  return null;
}
