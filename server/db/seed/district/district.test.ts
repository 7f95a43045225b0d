// @vitest-environment node
import { describe, expect, it } from 'vitest';
import { alongReach, distanceM, isInArea, snapToReaches } from '../../../../shared/geo';
import type { LonLat } from '../../../../shared/schemas/basics';
import { amountOf } from '../../../../shared/amount';
import { idSchema } from '../../../../shared/schemas/basics';
import { isRiver } from '../../../../shared/assemble';
import { evarrow, ollemar, quillock } from '../../../../tiles/district-points';
import { districtRegisters } from './index';
import { estuaryStretches } from './places';
import { districtIncidents } from './scenarios';

const river = districtRegisters.waters.find(({ id }) => id === 'river-ollemar')!.data;
if (!isRiver(river)) throw new Error('the Ollemar is a river');
const reachById = new Map(river.reaches.map((reach) => [reach.id, reach]));
const areaById = new Map(districtRegisters.waters.flatMap(({ id, data }) => (isRiver(data) ? [] : [[id, data.area] as const])));

/** Metres from a position to the nearest vertex of the area's edges, enough for rings with a vertex every 100 m or less near shore. */
function offShoreM(position: LonLat, area: readonly (readonly LonLat[])[]): number {
  if (isInArea(position, area)) return 0;
  const edges = area.map((ring, i) => ({ id: String(i), centreline: ring.map(([lon, lat], k): [number, number, number] => [lon, lat, -k]) }));
  return snapToReaches(position, edges)?.distanceM ?? Infinity;
}

describe('the river network', () => {
  it.each([
    ['Ollemar', ollemar, ['ol-upper', 'ol-middle', 'ol-lower', ...estuaryStretches.map(({ id }) => id)]],
    ['Evarrow', evarrow, ['evarrow']],
    ['Quillock', quillock, ['quillock']],
  ] as const)('passes every surveyed point of the %s at its chainage', (_name, points, reachIds) => {
    for (const [lon, lat, km] of points) {
      const reach = reachIds.map((id) => reachById.get(id)!).find(({ centreline }) => km <= centreline[0]![2] && km >= centreline[centreline.length - 1]![2])!;
      const { position } = alongReach(reach, km);
      // 5 decimals of a degree are 1.1 m.
      expect(distanceM(position, [lon, lat])).toBeLessThan(2);
    }
  });

  it('is drawn within 10 % of its chainage, with fewer than 200 vertices a reach', () => {
    for (const { id, centreline } of river.reaches) {
      const drawnKm = centreline.slice(1).reduce((sum, [lon, lat], i) => sum + distanceM([lon, lat], [centreline[i]![0], centreline[i]![1]]), 0) / 1_000;
      const ratio = drawnKm / (centreline[0]![2] - centreline[centreline.length - 1]![2]);
      expect(ratio, id).toBeGreaterThan(0.97);
      // A meander may lengthen the line by a few per cent; more would show the cloud in the wrong place.
      expect(ratio, id).toBeLessThan(1.1);
      expect(centreline.length, id).toBeLessThan(200);
    }
  });

  it('joins each reach to the next one where that begins', () => {
    for (const reach of river.reaches) {
      if (reach.downstreamReachId === null) continue;
      const end = reach.centreline[reach.centreline.length - 1]!;
      const start = reachById.get(reach.downstreamReachId)!.centreline[0]!;
      expect(distanceM([end[0], end[1]], [start[0], start[1]]), reach.id).toBeLessThan(1);
    }
  });

  it('takes in Evarrow from the left and Quillock from the right, looking downstream', () => {
    for (const id of ['evarrow', 'quillock']) {
      const reach = reachById.get(id)!;
      const [lon, lat] = reach.centreline[0]!;
      const snap = snapToReaches([lon, lat], river.reaches.filter((main) => main.id.startsWith('ol-')));
      expect(snap?.bank).toBe(reach.joinsOnBank);
    }
  });

  it('carries at each flow what width, depth and velocity give', () => {
    for (const { id, hydraulics } of river.reaches)
      for (const row of hydraulics) {
        const carried = row.widthM * row.depthM * row.velocityMps;
        // Figures are given to two or three digits.
        expect(Math.abs(carried / row.dischargeM3s - 1), `${id} ${row.flowName}`).toBeLessThan(0.03);
      }
  });
});

describe('the registers', () => {
  it('use valid ids and no code twice', () => {
    for (const items of Object.values(districtRegisters)) {
      expect(new Set(items.map(({ id }) => id)).size).toBe(items.length);
      expect(new Set(items.map(({ code }) => code)).size).toBe(items.length);
      for (const { id } of items) expect(idSchema.safeParse(id).success, id).toBe(true);
    }
    const everyId = Object.values(districtRegisters).flatMap((items) => items.map(({ id }) => id));
    expect(new Set(everyId).size).toBe(everyId.length);
  });

  it('name only waters, reaches and substances that exist', () => {
    const waters = new Set(districtRegisters.waters.map(({ id }) => id));
    const substances = new Set(districtRegisters.substances.map(({ id }) => id));
    for (const { id, data } of [...districtRegisters.receptors, ...districtRegisters.sources, ...districtRegisters.stations]) {
      expect(waters, id).toContain(data.waterId);
      if (data.channel) expect([...reachById.keys()], id).toContain(data.channel.reachId);
      expect(data.channel === null, id).toBe(data.waterId !== 'river-ollemar');
    }
    for (const { id, data } of districtRegisters.receptors) for (const { substanceId } of data.actionValues) expect(substances, id).toContain(substanceId);
    for (const { id, data } of districtRegisters.sources) for (const { substanceId } of data.holdings) expect(substances, id).toContain(substanceId);
  });

  it('place receptors and sources of open waters in the water or on its shore', () => {
    for (const { id, data } of [...districtRegisters.receptors, ...districtRegisters.sources]) {
      const area = areaById.get(data.waterId);
      if (area) expect(offShoreM(data.position, area), id).toBeLessThan(200);
    }
    expect(isInArea([-117.43, -44.48], areaById.get('branvell-bay')!)).toBe(true);
    expect(isInArea([-116.8765, -44.561], areaById.get('lake-thessaby')!)).toBe(true);
  });

  it('give the intake at Dunnaveth its surveyed place', () => {
    const intake = districtRegisters.receptors.find(({ code }) => code === 'INT-1')!;
    expect(distanceM(intake.data.position, [-116.8016, -44.449])).toBeLessThan(2);
  });
});

describe('the demonstration scenarios', () => {
  const scenarios = districtIncidents.flatMap(({ scenarios }) => scenarios);
  const documents = new Map(scenarios.map(({ key, document }) => [key, document]));

  it('are twelve cases and their variants in one library, each with a name and a note of its own', () => {
    const cases = new Set(districtIncidents.find(({ name }) => name === 'Library of the district')!.scenarios.map(({ key }) => key.split('-')[0]));
    expect([...cases].sort()).toEqual(['S01', 'S02', 'S03', 'S04', 'S05', 'S06', 'S07', 'S08', 'S09', 'S10', 'S11', 'S12']);
    for (const what of ['key', 'name', 'note'] as const) expect(new Set(scenarios.map((scenario) => scenario[what])).size).toBe(scenarios.length);
  });

  it.each([
    ['S01', 822.4, 0.05], // 4,000 kg x 0.25 x 14.007/17.031
    ['S02', 144, 1e-9],
    ['S03', 2.5, 1e-9],
    ['S04', 450, 1e-9],
    ['S05-2', 30, 1e-9],
    ['S06', 9e13, 1],
    ['S06-N', 900, 1e-9],
    ['S07', 509, 0.05], // 2,000 kg x 63.546/249.677
    ['S08', 18, 1e-9],
    ['S09', 25, 1e-9],
    ['S10', 2.88e14, 1],
    ['S11', 20_000, 1e-9],
    ['S12', 5.832e13, 1],
    ['S12-N', 2_041.2, 1e-9],
  ])('%s releases %d kg or counts', (key, amount, within) => expect(Math.abs(amountOf(documents.get(key)!.releases[0]!.amount).likely! - amount)).toBeLessThanOrEqual(within));

  it('start at the local clock and release inside their water', () => {
    for (const { startAt, releases, water } of documents.values()) {
      expect(startAt).toMatch(/-08:00$/);
      for (const { position, channel } of releases)
        if (water.kind === 'open') expect(isInArea(position, water.area)).toBe(true);
        else expect(water.reaches.map(({ id }) => id)).toContain(channel?.reachId);
    }
  });

  it('ask of each receptor that decides a value for their substance', () => {
    const valued = (key: string) => documents.get(key)!.receptors.filter(({ actionValues }) => actionValues.length > 0).map(({ code }) => code);
    expect(valued('S01')).toEqual(expect.arrayContaining(['INT-1', 'IRR-1', 'INT-2']));
    expect(valued('S02')).toEqual(expect.arrayContaining(['HAT-1', 'INT-2']));
    expect(valued('S03')).toContain('INT-2');
    expect(valued('S04')).toEqual(expect.arrayContaining(['STK-1', 'INT-1', 'INT-2']));
    expect(valued('S05-2')).toEqual(['INT-3', 'BCH-2']);
    expect(valued('S06')).toEqual(['BCH-2']);
    expect(valued('S06-N')).toEqual(['INT-3', 'BCH-2']);
    expect(valued('S08')).toEqual(expect.arrayContaining(['INT-4', 'SHL-1', 'AQ-1']));
    expect(valued('S09')).toEqual(['ECO-1']);
    expect(valued('S10')).toContain('BCH-1');
    expect(valued('S11')).toEqual(expect.arrayContaining(['INT-4', 'BCH-1', 'AQ-1']));
    expect(valued('S12')).toContain('BCH-1');
    expect(valued('S12-N')).toEqual(expect.arrayContaining(['INT-4', 'BCH-1']));
  });
});
