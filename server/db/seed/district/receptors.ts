import { onReach } from './places';
import { contact, INVENTED, type WrittenItem } from './seed-item';

type Receptor = WrittenItem<'receptors'>['data'];
type Limit = NonNullable<Receptor['actionValues']>[number];

const limit = (substanceId: string, value: number, unit: Limit['unit'], basis: string, source: string, averagingMinutes = 0): Limit => ({ substanceId, value, unit, basis, source, averagingMinutes });
const DEMO = 'Site value, invented for the demonstration';
const EU = 'Directive 98/83/EC Annex I';

/** What a drinking-water intake watches for. */
const intakeLimits = (): Limit[] => [
  limit('ammonia-solution', 0.39, 'mg/l', 'as N', 'EU indicator parameter 0.50 mg/l as NH4 (from memory)'),
  limit('digester-ammonia', 0.39, 'mg/l', 'as N', 'EU indicator parameter 0.50 mg/l as NH4 (from memory)'),
  limit('sodium-hypochlorite', 4, 'mg/l', 'as free Cl2', 'US EPA maximum residual disinfectant level'),
  limit('chlorpyrifos', 0.1, 'ug/l', 'each pesticide', EU),
  limit('mcpa', 0.1, 'ug/l', 'each pesticide', EU),
  limit('chromium-vi', 25, 'ug/l', 'total Cr', 'Directive (EU) 2020/2184, later value (from memory)'),
  limit('benzene', 1, 'ug/l', '', EU),
  limit('copper-sulfate', 2_000, 'ug/l', 'as Cu', EU),
  limit('pfas-20', 0.1, 'ug/l', 'sum of 20', 'Directive (EU) 2020/2184 Annex I (from memory)'),
];
const aquaticFresh = (): Limit[] => [
  limit('ammonia-solution', 10, 'mg/l', 'as N, pH 7.6', DEMO, 60),
  limit('digester-ammonia', 10, 'mg/l', 'as N, pH 7.6', DEMO, 60),
  limit('sodium-hypochlorite', 19, 'ug/l', 'total residual', 'US EPA aquatic life, acute', 60),
  limit('chlorpyrifos', 0.1, 'ug/l', '', 'Directive 2008/105/EC, greatest allowed'),
  limit('chromium-vi', 16, 'ug/l', 'Cr(VI)', 'US EPA aquatic life, acute', 60),
];
const bathing = (count: number, water: string): Limit[] => [limit('e-coli', count, 'counts/100ml', 'cfu', `Directive 2006/7/EC Annex I, ${water}, sufficient`)];
const seafood = (): Limit[] => [
  limit('copper-sulfate', 4.8, 'ug/l', 'dissolved', 'US EPA aquatic life, sea water, acute', 60),
  limit('phenol', 300, 'ug/l', '', 'Taint of fish and shellfish (from memory)'),
  limit('mcpa', 5, 'ug/l', '', DEMO),
  limit('pfas-20', 0.1, 'ug/l', 'sum of 20', DEMO),
];

export const receptors: WrittenItem<'receptors'>[] = [
  {
    id: 'int-1', code: 'INT-1', name: 'Dunnaveth intake', ownerName: 'Dunnaveth Water', lastCheckedOn: '2026-10-05',
    data: { kind: 'intake', ...onReach('ol-upper', 42, 'right'), closingMinutes: 20, storageHours: 10, peopleServed: 6_000, contact: contact('Dunnaveth Water duty desk', '0142'), actionValues: intakeLimits(), note: INVENTED },
  },
  {
    id: 'irr-1', code: 'IRR-1', name: 'Low Meadows headgate', ownerName: 'Low Meadows Growers', lastCheckedOn: '2026-04-18',
    data: {
      kind: 'irrigation', ...onReach('ol-upper', 36, 'right'), closingMinutes: 45, contact: contact('Low Meadows gatekeeper', '0136'),
      actionValues: [limit('ammonia-solution', 5, 'mg/l', 'as N', DEMO), limit('copper-sulfate', 200, 'ug/l', 'as Cu', 'Irrigation threshold, San Francisco Bay Basin Plan table 3-6'), limit('mcpa', 5, 'ug/l', '', DEMO)],
      note: `${INVENTED}. Salad crops: foliar contact.`,
    },
  },
  {
    id: 'int-2', code: 'INT-2', name: 'Essendray intake', ownerName: 'Essendray Water', lastCheckedOn: '2026-10-05',
    data: { kind: 'intake', ...onReach('ol-lower', 20, 'right'), closingMinutes: 30, storageHours: 18, peopleServed: 48_000, contact: contact('Essendray control room', '0120'), actionValues: [...intakeLimits(), limit('phenol', 1, 'ug/l', '', 'Historic limit against chlorophenol taste')], note: `${INVENTED}. Chlorinates.` },
  },
  {
    id: 'ind-1', code: 'IND-1', name: 'Board mill cooling', ownerName: 'Ollemar Board', lastCheckedOn: '2025-06-30',
    data: { kind: 'industry', ...onReach('ol-lower', 17, 'left'), closingMinutes: 60, storageHours: 4, contact: contact('Board mill shift lead', '0117'), actionValues: [limit('mcpa', 50, 'ug/l', '', DEMO), limit('ammonia-solution', 20, 'mg/l', 'as N', `${DEMO}: copper alloys in the coolers`)], note: INVENTED },
  },
  {
    id: 'hat-1', code: 'HAT-1', name: 'Trout hatchery', ownerName: 'Quillock Trout', lastCheckedOn: '2026-08-29',
    data: { kind: 'hatchery', ...onReach('quillock', 3, 'left'), closingMinutes: 10, storageHours: 2, contact: contact('Hatchery on call', '0103'), actionValues: aquaticFresh(), note: `${INVENTED}. Storage is two hours of recirculation.` },
  },
  {
    id: 'int-3', code: 'INT-3', name: 'Thessaby tower', ownerName: 'Thessaby Water', lastCheckedOn: '2026-09-22',
    data: { kind: 'intake', position: [-116.8765, -44.561], waterId: 'lake-thessaby', depthsM: [3, 9, 15], closingMinutes: 15, storageHours: 30, peopleServed: 22_000, contact: contact('Thessaby Water duty desk', '0115'), actionValues: intakeLimits(), note: `${INVENTED}. Draw-off at 3, 9 or 15 m; changing takes 15 min.` },
  },
  {
    id: 'bch-2', code: 'BCH-2', name: 'Thessaby cove', ownerName: 'District health office', lastCheckedOn: '2026-11-03',
    data: {
      kind: 'bathing', position: [-116.826, -44.603], waterId: 'lake-thessaby', contact: contact('Health office duty officer', '0190'),
      actionValues: [...bathing(900, 'inland'), limit('digester-ammonia', 0.39, 'mg/l', 'as N', DEMO), limit('benzene', 10, 'ug/l', '', 'Ten times the drinking value, screening (common practice, no source)')],
      note: `${INVENTED}. Bathing from December to March.`,
    },
  },
  {
    id: 'eco-1', code: 'ECO-1', name: 'Ferrowmere sluice', ownerName: 'Ferrowmere Trust', lastCheckedOn: '2026-03-12',
    data: { kind: 'ecological', ...onReach('ol-estuary', 7, 'left'), closingMinutes: 40, storageHours: null, contact: contact('Ferrowmere warden', '0107'), actionValues: [...aquaticFresh(), limit('mcpa', 5, 'ug/l', '', DEMO)], note: `${INVENTED}. Inlet of the marsh; can stay shut for two tides.` },
  },
  {
    id: 'shl-1', code: 'SHL-1', name: 'Cockle flats', ownerName: 'Branvell Shellfish', lastCheckedOn: '2025-10-01',
    data: { kind: 'shellfish', position: [-117.318, -44.515], waterId: 'branvell-bay', contact: contact('Branvell Shellfish manager', '0118'), actionValues: [...seafood(), limit('e-coli', 230, 'counts/100ml', 'cfu in water', DEMO)], note: `${INVENTED}. Intertidal; harvest on weekdays.` },
  },
  {
    id: 'bch-1', code: 'BCH-1', name: 'Nettimar Sands', ownerName: 'District health office', lastCheckedOn: '2026-11-03',
    data: { kind: 'bathing', position: [-117.335, -44.4225], waterId: 'branvell-bay', contact: contact('Health office duty officer', '0190'), actionValues: [...bathing(500, 'coastal'), limit('phenol', 300, 'ug/l', '', DEMO), limit('digester-ammonia', 0.39, 'mg/l', 'as N', DEMO)], note: `${INVENTED}. Bathing from December to March.` },
  },
  {
    id: 'int-4', code: 'INT-4', name: 'Nettimar desalination', ownerName: 'Nettimar Water', lastCheckedOn: '2026-10-19',
    data: { kind: 'intake', position: [-117.352, -44.428], waterId: 'branvell-bay', depthsM: [8], closingMinutes: 25, storageHours: 24, peopleServed: 31_000, contact: contact('Nettimar Water control', '0128'), actionValues: [...intakeLimits(), limit('phenol', 1, 'ug/l', '', 'Historic limit against chlorophenol taste')], note: `${INVENTED}. Draws from 8 m; chlorinates.` },
  },
  {
    id: 'aq-1', code: 'AQ-1', name: 'Skarrow pens', ownerName: 'Skarrow Salmon', lastCheckedOn: '2026-02-27',
    data: { kind: 'fish-farm', position: [-117.372, -44.545], waterId: 'branvell-bay', depthsM: [0, 12], closingMinutes: 90, contact: contact('Skarrow site manager', '0145'), actionValues: [...seafood(), limit('sodium-hypochlorite', 13, 'ug/l', '', 'US EPA aquatic life, sea water, acute', 60)], note: `${INVENTED}. Salmon, pens from the surface to 12 m; lowering them takes 90 min.` },
  },
];
