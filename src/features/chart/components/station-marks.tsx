import { useQuery } from '@tanstack/react-query';
import { useMemo } from 'react';
import { StationLayer, type StationMark } from '../../../map/station-layer';
import { registerQuery } from '../api';

/** Gauges and sampling points on the water of the draft; none until there is one. */
export function StationMarks({ waterId }: { waterId: string }) {
  const { data } = useQuery(registerQuery('stations'));
  const stations = useMemo<StationMark[]>(
    () =>
      (data ?? [])
        .filter((item) => item.data.waterId === waterId && !item.isArchived)
        .map((item) => ({ id: item.id, code: item.code, name: item.name, kind: item.data.kind === 'sampling-point' ? 'sampling' : 'gauge', position: item.data.position })),
    [data, waterId],
  );
  return <StationLayer stations={stations} />;
}
