import L from 'leaflet';
import { useEffect, useId, useRef, useState, type FormEvent } from 'react';
import { useMap } from 'react-leaflet';
import { formatCoordinates, parseCoordinates } from './coordinates';

/** Typed coordinates instead of dragging: shows how the text was read before it goes there. */
export function GoTo({ onClose }: { onClose: () => void }) {
  const map = useMap();
  const id = useId();
  const input = useRef<HTMLInputElement>(null);
  const mark = useRef<L.Marker | null>(null);
  const [text, setText] = useState('');
  const [tried, setTried] = useState(false);
  const parsed = parseCoordinates(text);

  useEffect(() => {
    input.current?.focus();
    return () => void mark.current?.remove();
  }, []);

  const go = (event: FormEvent) => {
    event.preventDefault();
    setTried(true);
    if (!parsed.ok) return;
    const at: L.LatLngTuple = [parsed.position[1], parsed.position[0]];
    mark.current?.remove();
    mark.current = L.marker(at, { icon: goToIcon(), keyboard: false, interactive: false }).addTo(map);
    map.setView(at, Math.max(map.getZoom(), 12));
  };

  return (
    <form className="map-panel" onSubmit={go} onKeyDown={(event) => event.key === 'Escape' && onClose()} noValidate>
      <label htmlFor={id}>Coordinates</label>
      <div className="map-panel-row">
        <input id={id} ref={input} value={text} onChange={(event) => setText(event.target.value)} placeholder="-44.449, -116.802" autoComplete="off" spellCheck={false} aria-describedby={`${id}-note`} aria-invalid={tried && !parsed.ok} />
        <button type="submit">Go</button>
      </div>
      <p id={`${id}-note`} className="map-panel-note" aria-live="polite">
        {parsed.ok ? `${formatCoordinates(parsed.position, 'decimal')} · ${formatCoordinates(parsed.position, 'utm')}` : tried && text !== '' ? parsed.message : 'Decimal degrees, degrees and minutes, or UTM such as 11 S 516726 5078031'}
      </p>
    </form>
  );
}

const goToIcon = () => L.divIcon({ className: 'map-go-to-mark', iconSize: [36, 36], html: '<svg viewBox="-18 -18 36 36" aria-hidden="true"><path d="M-16 0H-6M6 0H16M0 -16V-6M0 6V16"/><circle r="6"/></svg>' });
