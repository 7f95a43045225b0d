import type { ReceptorKind } from '../../shared/schemas/estimate';
import { plateStateWords, receptorPlates, type PlateState } from './receptor-plates';

/** The plate of a receptor as it stands on the map, for lists and legends beside it. */
export function ReceptorPlate({ kind, number, state, size = 28 }: { kind: ReceptorKind; number: string | number; state: PlateState; size?: number }) {
  const { outline, name, letter } = receptorPlates[kind];
  return (
    <svg className={`plate plate-${state}`} viewBox="-18 -18 36 36" width={size} height={size} role="img" aria-label={`${name}, ${plateStateWords[state]}`}>
      <title>{`${letter}: ${name}, ${plateStateWords[state]}`}</title>
      <path className="plate-ground" d={outline} />
      {state === 'hatched' && <path className="plate-hatch" d="M-12 2L2 -12M-12 11L11 -12M-3 12L12 -3" />}
      <text className="plate-number" x="0" y={kind === 'ecological' ? 10 : 5} textAnchor="middle">
        {number}
      </text>
    </svg>
  );
}
