import { areaOf, centrelineOf, estuaryStretches, type ReachId } from './places';
import { INVENTED, type WrittenItem } from './seed-item';

type Row = [dischargeM3s: number, widthM: number, depthM: number, velocityMps: number];
/** Flows exceeded 95, 50 and 10 % of the time. */
function hydraulics(q95: Row, q50: Row, q10: Row) {
  const row = (flowName: string, exceededPercent: number, [dischargeM3s, widthM, depthM, velocityMps]: Row) => ({ flowName, exceededPercent, dischargeM3s, widthM, depthM, velocityMps });
  return [row('Q50', 50, q50), row('Q95', 95, q95), row('Q10', 10, q10)];
}

type Join = { downstreamReachId: ReachId | null; joinsOnBank?: 'left' | 'right' };
const reach = (id: ReachId, name: string, chainagePrefix: string, slope: number | null, rows: ReturnType<typeof hydraulics>, join: Join) => ({
  id, name, chainagePrefix, centreline: centrelineOf(id), slope, hydraulics: rows, ...join,
  coefficientNote: 'Longitudinal dispersion after Fischer et al. 1979 from these figures, transverse mixing 0.6 H u*. No dye test.',
});

const PERIOD_S = 12.42 * 3_600;
/** High water at T0: the strongest flood was a quarter of a tide before it. */
const MAX_FLOOD_S = -PERIOD_S / 4;
const tide = (majorMps: number, floodTowardDeg: number) => ({ kind: 'tide' as const, name: 'M2', majorMps, floodTowardDeg, periodS: PERIOD_S, maxFloodS: MAX_FLOOD_S });
const residual = (speedMps: number, towardDeg: number) => ({ kind: 'residual' as const, speedMps, towardDeg });
/** The estuary as a channel: fresh water over a widening section. An estimate adds the tide of the day. */
const estuaryReaches = () =>
  estuaryStretches.map(({ id, fromKm, toKm, widthM, depthM, springsMps }, i) => {
    const row = (dischargeM3s: number): Row => [dischargeM3s, widthM, depthM, dischargeM3s / (widthM * depthM)];
    return {
      ...reach(id, `Ollemar estuary, km ${fromKm} to ${toKm === 0 ? 'the bar' : toKm}`, 'OL', null, hydraulics(row(5.8), row(16.5), row(48)), { downstreamReachId: estuaryStretches[i + 1]?.id ?? null }),
      dispersionM2s: 80,
      // H u* with u* a tenth of the strongest tidal current.
      transverseM2s: Number((0.1 * depthM * springsMps).toPrecision(2)),
      tidal: true,
      coefficientNote: 'Velocity is river flow over section, without the tide. Dispersion 80 m2/s averaged over the tide (invented; 30 to 300 is common, Fischer et al. 1979). Across: H u* of the tide, u* a tenth of its speed (from memory: 0.4 to 1.6 H u* in estuaries).',
    };
  });

const TIDE_TEXT =
  'Level 2.0 + A cos(2 pi (t - high water) / 12.42 h) m above chart datum, A 1.6 m at springs and 0.7 m at neaps. The current runs a quarter of a tide behind: strongest ebb 3.1 h after high water. The states below put high water at T0; set the time of strongest flood for the day at hand. High water at the bar 12 May 2031 05:10 and 17:35 UTC-08:00 (springs).';

export const waters: WrittenItem<'waters'>[] = [
  {
    id: 'river-ollemar', code: 'OL', name: 'River Ollemar and tributaries', ownerName: 'Hydrology desk', lastCheckedOn: '2026-09-14',
    data: {
      kind: 'river',
      chainageOrigin: 'km 0 at the bar between North Mole and Ferrow Spit, rising upstream; tributaries from their confluence',
      flowNames: ['Q50', 'Q95', 'Q10'],
      reaches: [
        reach('ol-upper', 'Ollemar, km 54.0 to Evarrow', 'OL', 0.0005, hydraulics([3.2, 21.2, 0.6, 0.253], [9, 24, 0.95, 0.395], [28, 27.5, 1.58, 0.643]), { downstreamReachId: 'ol-middle' }),
        reach('ol-middle', 'Ollemar, Evarrow to Quillock', 'OL', 0.0004, hydraulics([5.2, 28.4, 0.74, 0.248], [14, 32, 1.15, 0.38], [40, 36.3, 1.84, 0.597]), { downstreamReachId: 'ol-lower' }),
        reach('ol-lower', 'Ollemar, Quillock to Low Weir', 'OL', 0.0003, hydraulics([5.8, 31.8, 0.78, 0.234], [16.5, 36, 1.25, 0.367], [48, 40.9, 2.02, 0.581]), { downstreamReachId: 'ol-estuary-12' }),
        ...estuaryReaches(),
        reach('evarrow', 'Evarrow Water, Thessaby Dam to Ollemar', 'EV', 0.0012, hydraulics([2, 12.5, 0.53, 0.301], [5, 14, 0.8, 0.446], [12, 15.6, 1.19, 0.65]), { downstreamReachId: 'ol-middle', joinsOnBank: 'left' }),
        reach('quillock', 'Quillock Brook', 'QU', 0.003, hydraulics([0.6, 6.3, 0.32, 0.301], [2.5, 7.5, 0.6, 0.556], [8, 8.6, 1.01, 0.917]), { downstreamReachId: 'ol-lower', joinsOnBank: 'right' }),
      ],
      note: `${INVENTED}. The drawn line is about 5 % longer than the chainage, which is the surveyed one and gives the distances. Evarrow flow is set at Thessaby Dam: 2 (least), 5 (usual) or 12 m3/s (two turbines).`,
    },
  },
  {
    id: 'lake-thessaby', code: 'LT', name: 'Lake Thessaby', ownerName: 'Hydrology desk', lastCheckedOn: '2026-07-02',
    data: {
      kind: 'lake', area: areaOf('lake'), depthM: 11, mixingDepthM: 8,
      currents: [
        { name: 'Along the lake toward the dam, 2 cm/s', parts: [residual(0.02, 315)] },
        { name: 'South-easterly wind 5 m/s', parts: [{ kind: 'wind', windSpeedMps: 5, windFromDeg: 135, driftFraction: 0.02 }] },
        { name: 'Still', parts: [] },
      ],
      mixing: { kind: 'okubo' },
      note: `${INVENTED}. Surface 12 km2, mean depth 11 m, greatest 24 m at the dam. Thermocline at 8 m from November to March; mixed to the bottom in winter. Spreading after Okubo 1971, whose data are from the sea: take it as a first guess in a lake.`,
    },
  },
  {
    id: 'kestovar-harbour', code: 'KH', name: 'Kestovar harbour, inner basin', ownerName: 'Harbour office', lastCheckedOn: '2026-05-20',
    data: {
      kind: 'harbour', area: areaOf('harbour'), depthM: 9, mixingDepthM: 9,
      currents: [{ name: 'Still', parts: [] }, { name: 'Slow turn along the quays, 3 cm/s', parts: [residual(0.03, 96)] }],
      tide: `${TIDE_TEXT} The basin fills and empties through a gap of 80 m; return factor 0.5 (invented).`,
      mixing: { kind: 'constant', alongM2s: 0.3, acrossM2s: 0.3, turnsWithCurrent: false },
      note: `${INVENTED}. 900 by 400 m. Mixing 0.3 m2/s: 0.05 to 1 is the usual order in harbours (common practice, no source).`,
    },
  },
  {
    id: 'ollemar-estuary', code: 'OE', name: 'Ollemar estuary, tidal water', ownerName: 'Harbour office', lastCheckedOn: '2026-05-20',
    data: {
      kind: 'estuary', area: areaOf('estuary'), depthM: 5, mixingDepthM: 5,
      currents: [
        { name: 'Springs, at km 7', parts: [tide(0.75, 100)] },
        { name: 'Neaps, at km 7', parts: [tide(0.38, 100)] },
        { name: 'Springs, at the bar', parts: [tide(0.9, 100)] },
        { name: 'Neaps, at the bar', parts: [tide(0.45, 100)] },
        { name: 'Springs, at km 12', parts: [tide(0.45, 70)] },
        { name: 'Neaps, at km 12', parts: [tide(0.22, 70)] },
      ],
      tide: TIDE_TEXT,
      mixing: { kind: 'constant', alongM2s: 20, acrossM2s: 0.5 },
      note: `${INVENTED}. One current for the whole water: use near the stated chainage only.`,
    },
  },
  {
    id: 'branvell-bay', code: 'BB', name: 'Branvell Bay and open coast', ownerName: 'Harbour office', lastCheckedOn: '2026-08-11',
    data: {
      kind: 'coast', area: areaOf('coast'), depthM: 18, mixingDepthM: 6,
      currents: [
        { name: 'Offshore, neaps', parts: [tide(0.18, 350), residual(0.08, 350)] },
        { name: 'Offshore, springs', parts: [tide(0.35, 350), residual(0.08, 350)] },
        { name: 'In the bay, neaps', parts: [tide(0.12, 10), residual(0.08, 350)] },
        { name: 'In the bay, springs', parts: [tide(0.25, 10), residual(0.08, 350)] },
        { name: 'Residual alone', parts: [residual(0.08, 350)] },
      ],
      tide: TIDE_TEXT,
      mixing: { kind: 'okubo' },
      note: `${INVENTED}. 5 to 22 m deep inside the bay. Spreading after Okubo 1971 (a factor of 3 either way in variance is normal).`,
    },
  },
];
