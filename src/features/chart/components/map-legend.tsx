import { useState } from 'react';
import type { Measure } from '../../../../shared/format';
import type { Level } from '../../../../shared/schemas/estimate-result';
import { Icon } from '../../../components/icon';
import { ConcentrationGauge } from '../../../map/concentration-gauge';
import type { MapTheme } from '../../../map/palette';

type Props = { levels: readonly Level[]; measure: Measure; theme: MapTheme; showsEnvelope: boolean; onEnvelope: (shows: boolean) => void; showsArrivals: boolean; /** Null where the forecast has no lines of first arrival. */ onArrivals: ((shows: boolean) => void) | null; showsPaths: boolean; /** Null where the forecast has no paths. */ onPaths: ((shows: boolean) => void) | null };

/** The staff gauge over the map; folds away where it covers something. */
export function MapLegend({ levels, measure, theme, showsEnvelope, onEnvelope, showsArrivals, onArrivals, showsPaths, onPaths }: Props) {
  const [isOpen, setOpen] = useState(() => window.matchMedia('(min-width: 48rem)').matches);
  return (
    <section data-covers-map aria-label="Values on the map" className="absolute bottom-10 left-2 z-[1000] max-h-[calc(100%-3rem)] overflow-y-auto rounded-sm bg-sheet shadow-float max-md:top-2 max-md:bottom-auto print:shadow-none">
      <button type="button" aria-expanded={isOpen} onClick={() => setOpen(!isOpen)} className="flex min-h-9 w-full items-center gap-2 px-2 font-semibold -outline-offset-2 pointer-coarse:min-h-11 print:hidden">
        <Icon name={isOpen ? 'down' : 'right'} className="size-3.5 text-ink2" />
        Values
      </button>
      {isOpen && (
        <div className="px-2 pb-1 print:pt-1">
          <ConcentrationGauge levels={levels} measure={measure} theme={theme} />
          <label className="flex min-h-7 items-center gap-1.5 text-note pointer-coarse:min-h-11 print:hidden">
            <input type="checkbox" className="accent-kingfisher" checked={showsEnvelope} onChange={(event) => onEnvelope(event.target.checked)} />
            <span className="flex-1">reached at any time</span>
            <span aria-hidden="true" className="w-4 border-t-2 border-dotted border-ink2" />
          </label>
          {onArrivals && (
            <label className="flex min-h-7 items-center gap-1.5 text-note pointer-coarse:min-h-11 print:hidden">
              <input type="checkbox" className="accent-kingfisher" checked={showsArrivals} onChange={(event) => onArrivals(event.target.checked)} />
              <span className="flex-1">lines of first arrival</span>
              <span aria-hidden="true" className="w-4 border-t-2 border-ink" />
            </label>
          )}
          {onPaths && (
            <label className="flex min-h-7 items-center gap-1.5 text-note pointer-coarse:min-h-11 print:hidden">
              <input type="checkbox" className="accent-kingfisher" checked={showsPaths} onChange={(event) => onPaths(event.target.checked)} />
              <span className="flex-1">show random paths</span>
              <span aria-hidden="true" className="w-4 border-t border-ink" />
            </label>
          )}
        </div>
      )}
    </section>
  );
}
