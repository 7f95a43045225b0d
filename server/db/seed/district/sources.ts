import { onReach } from './places';
import { contact, INVENTED, type WrittenItem } from './seed-item';

export const sources: WrittenItem<'sources'>[] = [
  {
    id: 'v2-bridge', code: 'SRC-1', name: 'V2 bridge, tanker route', ownerName: 'Roads office', lastCheckedOn: '2026-06-16',
    data: { kind: 'bridge', ...onReach('ol-upper', 48, 'right'), drainPath: 'Deck gullies fall straight to the right bank; no interceptor', operator: 'District roads', contact: contact('Roads duty manager', '0201'), holdings: [{ substanceId: 'ammonia-solution', largestCredible: 3_700, strengthNote: '18 t of 25 % solution, 0.2056 kg N per kg' }], note: INVENTED },
  },
  {
    id: 'creamery', code: 'SRC-2', name: 'Quillock creamery', ownerName: 'Quillock Creamery', lastCheckedOn: '2026-01-20',
    data: { kind: 'tank', ...onReach('quillock', 4.8, 'left'), drainPath: 'Yard drain to the brook past a hand-worked penstock', operator: 'Quillock Creamery', contact: contact('Creamery shift lead', '0202'), holdings: [{ substanceId: 'sodium-hypochlorite', largestCredible: 144, strengthNote: '1,200 l at 120 g/l as Cl2' }], note: INVENTED },
  },
  {
    id: 'orchard-store', code: 'SRC-3', name: 'Evarrow orchard store', ownerName: 'Evarrow Growers', lastCheckedOn: '2025-11-03',
    data: { kind: 'store', ...onReach('evarrow', 8, 'right'), drainPath: 'Open ditch, 90 m to the right bank', operator: 'Evarrow Growers', contact: contact('Orchard store keeper', '0203'), holdings: [{ substanceId: 'chlorpyrifos', largestCredible: 2.5, strengthNote: 'Active substance reaching the water with fire-water' }], note: INVENTED },
  },
  {
    id: 'plating-works', code: 'SRC-4', name: 'Dunnaveth plating works', ownerName: 'Dunnaveth Plating', lastCheckedOn: '2026-02-09',
    data: { kind: 'tank', ...onReach('ol-upper', 45, 'right'), drainPath: 'Surface drain to an outfall on the right bank; shut-off valve in the yard', operator: 'Dunnaveth Plating', contact: contact('Plating works manager', '0204'), holdings: [{ substanceId: 'chromium-vi', largestCredible: 450, strengthNote: '3.0 m3 at 150 g/l Cr(VI)' }], note: INVENTED },
  },
  {
    id: 'lake-jetty', code: 'SRC-5', name: 'Lake jetty, fuel store', ownerName: 'Thessaby Marina', lastCheckedOn: '2026-07-02',
    data: { kind: 'berth', position: [-116.812, -44.608], waterId: 'lake-thessaby', drainPath: 'Straight from the jetty', operator: 'Thessaby Marina', contact: contact('Marina warden', '0205'), holdings: [{ substanceId: 'benzene', largestCredible: 60, strengthNote: 'Dissolved from 8,000 l of petrol; 10 to 60 kg' }], note: INVENTED },
  },
  {
    id: 'digester', code: 'SRC-6', name: 'Thessaby digester', ownerName: 'Thessaby Biogas', lastCheckedOn: '2026-07-02',
    data: {
      kind: 'tank', position: [-116.812, -44.608], waterId: 'lake-thessaby', drainPath: 'Ditch from the bund to the head of the jetty', operator: 'Thessaby Biogas', contact: contact('Digester on call', '0206'),
      holdings: [{ substanceId: 'e-coli', largestCredible: 9e13, strengthNote: '300 m3 at 3e7 cfu per 100 ml' }, { substanceId: 'digester-ammonia', largestCredible: 900, strengthNote: '300 m3 at 3 kg/m3 as N' }],
      note: INVENTED,
    },
  },
  {
    id: 'harbour-cargo', code: 'SRC-7', name: 'Kestovar inner quay, bulk cargo', ownerName: 'Harbour office', lastCheckedOn: '2026-05-20',
    data: { kind: 'berth', position: [-117.289, -44.4905], waterId: 'kestovar-harbour', drainPath: 'Over the quay edge', operator: 'Port of Kestovar', contact: contact('Harbour control', '0207'), holdings: [{ substanceId: 'copper-sulfate', largestCredible: 509, strengthNote: '2,000 kg of the pentahydrate, 0.2545 kg Cu per kg' }], note: INVENTED },
  },
  {
    id: 'quay-warehouse', code: 'SRC-8', name: 'River quay warehouse', ownerName: 'Harbour office', lastCheckedOn: '2025-05-12',
    data: { kind: 'store', position: [-117.2916, -44.4945], waterId: 'ollemar-estuary', drainPath: 'Roof and yard drains to the quay wall, right bank, km 1.0', operator: 'Kestovar Storage', contact: contact('Warehouse key holder', '0208'), holdings: [{ substanceId: 'pfas-20', largestCredible: 18, strengthNote: '1,200 m3 of fire-water at 15 mg/l' }], note: INVENTED },
  },
  {
    id: 'barge-berth', code: 'SRC-9', name: 'Estuary barge fairway', ownerName: 'Harbour office', lastCheckedOn: '2026-05-20',
    data: { kind: 'berth', ...onReach('ol-estuary', 9, 'mid'), drainPath: 'Straight into the fairway', operator: 'Ollemar Barges', contact: contact('Barge dispatcher', '0209'), holdings: [{ substanceId: 'mcpa', largestCredible: 25, strengthNote: 'One hatch' }], note: INVENTED },
  },
  {
    id: 'storm-overflow', code: 'SRC-10', name: 'Kestovar storm overflow', ownerName: 'Kestovar Drainage', lastCheckedOn: '2026-01-15',
    data: { kind: 'outfall', ...onReach('ol-estuary', 3, 'right'), drainPath: 'Outfall through the river wall', operator: 'Kestovar Drainage', contact: contact('Drainage control', '0210'), holdings: [{ substanceId: 'e-coli', largestCredible: 2.9e14, strengthNote: '0.8 m3/s for 5 h at 2e6 cfu per 100 ml' }], note: INVENTED },
  },
  {
    id: 'container-route', code: 'SRC-11', name: 'Coastal container route', ownerName: 'Harbour office', lastCheckedOn: '2026-08-11',
    data: { kind: 'other', position: [-117.43, -44.48], waterId: 'branvell-bay', drainPath: 'A container lost or damaged on deck', operator: 'Various carriers', contact: contact('Harbour control', '0207'), holdings: [{ substanceId: 'phenol', largestCredible: 20_000, strengthNote: 'One tank container, molten' }], note: INVENTED },
  },
  {
    id: 'sea-outfall', code: 'SRC-12', name: 'Nettimar sea outfall', ownerName: 'Nettimar Drainage', lastCheckedOn: null,
    data: {
      kind: 'outfall', position: [-117.375, -44.447], waterId: 'branvell-bay', drainPath: 'Diffuser at 16 m, 0.45 m3/s', operator: 'Nettimar Drainage', contact: contact('Outfall control', '0212'),
      holdings: [{ substanceId: 'e-coli', largestCredible: 5.8e13, strengthNote: '36 h at 1e5 cfu per 100 ml' }, { substanceId: 'digester-ammonia', largestCredible: 2_041, strengthNote: '36 h at 35 mg/l as N' }],
      note: `${INVENTED}. Initial dilution 60, set by the engineer.`,
    },
  },
];
