import { onReach } from './places';
import { INVENTED, type WrittenItem } from './seed-item';

type Station = WrittenItem<'stations'>;
const station = (id: string, code: string, name: string, kind: Station['data']['kind'], place: Pick<Station['data'], 'position' | 'waterId' | 'channel'>, access: string): Station => ({
  id, code, name, ownerName: kind === 'gauge' || kind === 'tide-gauge' ? 'Hydrology desk' : 'Field team', lastCheckedOn: '2026-09-14', data: { kind, ...place, access, note: INVENTED },
});

export const stations: Station[] = [
  station('sp-1', 'SP1', 'Dunnaveth road bridge', 'sampling-point', onReach('ol-upper', 41, 'mid'), 'From the footway; lay-by on the south side. Bottle on a line from the rail.'),
  station('sp-2', 'SP2', 'Meadows footbridge', 'sampling-point', onReach('ol-upper', 35.5, 'mid'), 'On foot, 600 m along the right bank; unlit.'),
  station('sp-3', 'SP3', 'Rail bridge', 'sampling-point', onReach('ol-lower', 27, 'left'), 'From the left bank below the bridge; never on the track.'),
  station('sp-4', 'SP4', 'Essendray Bridge', 'sampling-point', onReach('ol-lower', 21, 'mid'), 'From the footway; lit; traffic.'),
  station('sp-5', 'SP5', 'Low Weir', 'sampling-point', onReach('ol-lower', 14, 'right'), 'From the weir walkway; closed in floods.'),
  station('sp-6', 'SP6', 'V1 bridge', 'sampling-point', onReach('ol-estuary', 4.5, 'mid'), 'From the footway; strong wind; sample at a noted time from high water.'),
  station('ga', 'GA', 'Gauge Dunnaveth', 'gauge', onReach('ol-upper', 41, 'right'), 'Hut on the right bank.'),
  station('gb', 'GB', 'Gauge Essendray', 'gauge', onReach('ol-lower', 19, 'right'), 'Hut on the right bank.'),
  station('gc', 'GC', 'Gauge Quillock', 'gauge', onReach('quillock', 1, 'left'), 'Footpath from V2.'),
  station('gd', 'GD', 'Gauge Evarrow', 'gauge', onReach('evarrow', 9.5, 'right'), 'Below Thessaby Dam.'),
  station('tg-1', 'TG1', 'Tide gauge North Mole', 'tide-gauge', { position: [-117.3118, -44.4946], waterId: 'branvell-bay', channel: null }, 'Head of the mole; harbour control gives access.'),
];
