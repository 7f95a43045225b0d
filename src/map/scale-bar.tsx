import { useState } from 'react';
import { useMap, useMapEvents } from 'react-leaflet';
import { metresPerPixelAt } from './mercator';

const LONGEST_PX = 130;

/** The longest of 1, 2 or 5 times a power of ten metres that is not wider than the room for it. */
export function scaleLengthM(metresPerPixel: number): number {
  const most = LONGEST_PX * metresPerPixel;
  const power = 10 ** Math.floor(Math.log10(most));
  return power * (most >= 5 * power ? 5 : most >= 2 * power ? 2 : 1);
}

export const scaleText = (lengthM: number): string => (lengthM >= 1_000 ? `${lengthM / 1_000} km` : `${lengthM} m`);

export function ScaleBar() {
  const map = useMap();
  const read = () => metresPerPixelAt(map.getCenter().lat, map.getZoom());
  const [metresPerPixel, setMetresPerPixel] = useState(read);
  useMapEvents({ zoom: () => setMetresPerPixel(read()), moveend: () => setMetresPerPixel(read()) });
  const lengthM = scaleLengthM(metresPerPixel);
  const px = lengthM / metresPerPixel;
  return (
    <svg className="map-scale" width={px + 12} height="26" role="img" aria-label={`Scale: the bar is ${scaleText(lengthM)} long`}>
      <path className="map-scale-halo" d={`M6 20V24H${px + 6}V20`} />
      <path d={`M6 20V24H${px + 6}V20M${px / 2 + 6} 22V24`} />
      <text x={px / 2 + 6} y="15" textAnchor="middle">
        {scaleText(lengthM)}
      </text>
    </svg>
  );
}
