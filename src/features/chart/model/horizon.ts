import { distanceM } from '../../../../shared/geo';
import type { HydraulicsRow, Reach } from '../../../../shared/schemas/estimate';
import type { Draft, DraftCurrentPart, DraftOpenWater, DraftRelease, DraftRiver } from './draft';

const HOUR = 3_600;
/** Long enough for the tail behind the peak of the last receptor. Common practice, no source. */
const TAIL_SHARE = 1.5;
const SHORTEST_S = 6 * HOUR;
const LONGEST_S = 10 * 86_400;

export const releaseEndS = (release: Pick<DraftRelease, 'timing'>): number => {
  const { timing } = release;
  if (timing.kind === 'instantaneous') return timing.atS ?? 0;
  if (timing.kind === 'steady') return (timing.startS ?? 0) + (timing.durationS ?? 0);
  return timing.rows[timing.rows.length - 1]?.atS ?? 0;
};

/** Row of the chosen flow, or the one whose discharge is nearest to the one typed for the reach. */
function rowOf(reach: Reach, river: DraftRiver): HydraulicsRow | undefined {
  const typed = river.flow.discharges.find((entry) => entry.reachId === reach.id)?.dischargeM3s;
  if (typed) return [...reach.hydraulics].sort((a, b) => Math.abs(Math.log(a.dischargeM3s / typed)) - Math.abs(Math.log(b.dischargeM3s / typed)))[0];
  return reach.hydraulics.find((row) => row.flowName === river.flow.name) ?? reach.hydraulics[0];
}

/** Advective travel time from a place in the network to the last receptor below it (or the river's end), s. */
function riverTravelS(draft: Draft, river: DraftRiver, release: DraftRelease): number {
  const byId = new Map(river.reaches.map((reach) => [reach.id, reach] as const));
  let elapsed = 0;
  let lastReceptor = 0;
  let from = release.channel?.chainageKm ?? 0;
  const met = new Set<string>();
  for (let reach = byId.get(release.channel?.reachId ?? ''); reach && !met.has(reach.id); ) {
    met.add(reach.id);
    const speed = rowOf(reach, river)?.velocityMps ?? 0.3;
    // River flow alone takes days through tidal water: a receptor there does not set the length, unless the release is there too.
    const isReckoned = !reach.tidal || reach.id === release.channel?.reachId;
    for (const receptor of draft.receptors) {
      const at = receptor.channel;
      if (at?.reachId === reach.id && isReckoned && at.chainageKm <= from && !draft.leftOut.includes(receptor.id)) lastReceptor = Math.max(lastReceptor, elapsed + ((from - at.chainageKm) * 1_000) / speed);
    }
    const bottom = reach.centreline[reach.centreline.length - 1]![2];
    if (isReckoned) elapsed += (Math.max(0, from - bottom) * 1_000) / speed;
    const next: Reach | undefined = byId.get(reach.downstreamReachId ?? '');
    from = next ? joinChainage(reach, next) : 0;
    reach = next;
  }
  return lastReceptor || elapsed;
}

/** Chainage on the receiving reach nearest to the mouth of `reach`. */
function joinChainage(reach: Reach, next: Reach): number {
  const mouth = reach.centreline[reach.centreline.length - 1]!;
  return [...next.centreline].sort((a, b) => distanceM([a[0], a[1]], [mouth[0], mouth[1]]) - distanceM([b[0], b[1]], [mouth[0], mouth[1]]))[0]![2];
}

function partSpeed(part: DraftCurrentPart): number {
  if (part.kind === 'residual') return part.speedMps ?? 0;
  // Mean of |sin| over a tide is 2/pi, but what it carries away it brings back: a tenth is kept as net drift.
  if (part.kind === 'tide') return (part.majorMps ?? 0) * 0.1;
  if (part.kind === 'wind') return (part.windSpeedMps ?? 0) * (part.driftFraction ?? 0);
  return Math.max(0, ...part.rows.map((row) => Math.hypot(row.eastMps ?? 0, row.northMps ?? 0))) / 2;
}

function openTravelS(draft: Draft, water: DraftOpenWater, release: DraftRelease): number {
  const speed = Math.max(0.01, water.current.reduce((sum, part) => sum + partSpeed(part), 0));
  const distances = draft.receptors.filter((receptor) => !draft.leftOut.includes(receptor.id)).map((receptor) => distanceM(release.position, receptor.position));
  return Math.max(0, ...distances) / speed;
}

/** One frame each half hour where that makes a sensible number of them. */
export const automaticFrameCount = (horizonS: number): number => Math.min(96, Math.max(24, Math.round(horizonS / 1_800)));

/** Estimate length when none is typed: until the last receptor has been passed, in whole 6 h, between 6 h and 10 days. */
export function automaticHorizonS(draft: Draft): number {
  const { water } = draft;
  if (!water || draft.releases.length === 0) return 24 * HOUR;
  const spans = draft.releases.map((release) => (water.kind === 'river' ? riverTravelS(draft, water, release) : openTravelS(draft, water, release)) * TAIL_SHARE + releaseEndS(release));
  const wanted = Math.max(...spans) + 2 * HOUR;
  return Math.min(LONGEST_S, Math.max(SHORTEST_S, Math.ceil(wanted / (6 * HOUR)) * 6 * HOUR));
}
