import { describe, expect, it } from 'vitest';
import { amountOf } from '../../../../shared/amount';
import { rateFromT90 } from '../../../../shared/units';
import { districtItems } from '../../../../tests/helpers/district-register-items';
import { buildDocument, errorsAt } from './build-document';
import { emptyDraft, readDraft, type Draft } from './draft';
import { changeRelease, chooseSource, chooseSubstance, placeRelease, tickReceptor, type Registers } from './draft-actions';

const registers: Registers = { waters: districtItems('waters'), receptors: districtItems('receptors'), sources: districtItems('sources'), substances: districtItems('substances') };
const substance = (id: string) => registers.substances.find((item) => item.id === id)!;
const start = (at: string) => emptyDraft(at);

function placed(draft: Draft, lon: number, lat: number): Draft {
  const outcome = placeRelease(draft, [lon, lat], registers);
  if (!('draft' in outcome)) throw new Error(outcome.refused);
  return outcome.draft;
}

/** A tanker on the V2 bridge: four acts of the planner. */
function tanker(): Draft {
  let draft = placed(start('2031-05-12T06:40:00-08:00'), -116.7321, -44.4305);
  draft = chooseSubstance(draft, substance('ammonia-solution'), registers);
  draft = changeRelease(draft, 'r1', (release) => ({ ...release, amount: { how: 'mass', massKg: { low: 2_000, likely: 4_000, high: 8_000 }, activeFraction: substance('ammonia-solution').data.activeFraction } }));
  return changeRelease(draft, 'r1', (release) => ({ ...release, timing: { kind: 'steady', startS: 0, durationS: 600 } }));
}

describe('the tanker on the bridge, from a click on the river', () => {
  it('becomes a valid document on the right bank at km 48.0 with the usual flow', () => {
    const { document, errors } = buildDocument(tanker());
    expect(errors).toEqual([]);
    expect(document!.releases[0]!.channel).toMatchObject({ reachId: 'ol-upper', bank: 'right' });
    // The click is some 20 m north of the centreline; the river runs west here, so north is right.
    expect(document!.releases[0]!.channel!.chainageKm).toBeCloseTo(48.0, 1);
    expect(document!.water.kind === 'river' && document!.water.flow.name).toBe('Q50');
  });

  it('brings every receptor of the river with its action values for ammonia', () => {
    const { document } = buildDocument(tanker());
    expect(document!.receptors.map((receptor) => receptor.code)).toEqual(expect.arrayContaining(['INT-1', 'IRR-1', 'INT-2']));
    // 0.39 mg/l as N.
    expect(document!.receptors.find((receptor) => receptor.code === 'INT-1')!.actionValues[0]!.value).toBeCloseTo(0.39e-3, 9);
  });

  it('reckons 822 kg as nitrogen from 4,000 kg of solution', () => {
    expect(amountOf(buildDocument(tanker()).document!.releases[0]!.amount).likely).toBeCloseTo(4_000 * 0.2056, 6);
  });

  it('reaches beyond the 20 h that the cloud needs to the last intake, without being told', () => {
    const { document } = buildDocument(tanker());
    expect(document!.horizonS).toBeGreaterThan(23 * 3_600);
    expect(document!.horizonS).toBeLessThanOrEqual(10 * 86_400);
  });

  it('leaves out a receptor that is not ticked', () => {
    const draft = tanker();
    const id = draft.receptors.find((receptor) => receptor.code === 'HAT-1')!.id;
    expect(buildDocument(tickReceptor(draft, id, false)).document!.receptors.some((receptor) => receptor.id === id)).toBe(false);
  });
});

describe('slurry at the lake jetty, from a registered source', () => {
  function slurry(): Draft {
    const source = registers.sources.find((item) => item.id === 'digester')!;
    const outcome = chooseSource(chooseSubstance(start('2031-07-06T05:30:00-08:00'), substance('e-coli'), registers), source, registers);
    if (!('draft' in outcome)) throw new Error(outcome.refused);
    let draft = changeRelease(outcome.draft, outcome.releaseId, (release) => ({ ...release, amount: { how: 'volume-count', volumeM3: { low: 200, likely: 300, high: 400 }, countPerM3: 3e11 }, timing: { kind: 'steady', startS: 0, durationS: 3 * 3_600 } }));
    if (draft.water?.kind !== 'open') throw new Error('The digester stands at the lake');
    draft = { ...draft, water: { ...draft.water, mixingDepthM: 6 }, substance: { ...draft.substance!, loss: { kind: 'first-order', ratePerS: rateFromT90(40 * 3_600), source: 'test' }, applyLoss: true } };
    return draft;
  }

  it('counts organisms in the lake with both lake receptors', () => {
    const { document, errors } = buildDocument(slurry());
    expect(errors).toEqual([]);
    expect(document!.water).toMatchObject({ kind: 'open', waterKind: 'lake', mixingDepthM: 6 });
    expect(document!.receptors.map((receptor) => receptor.code).sort()).toEqual(expect.arrayContaining(['BCH-2', 'INT-3']));
    expect(amountOf(document!.releases[0]!.amount).likely).toBe(9e13);
  });

  it('caps at the strength of the spilled volume', () => {
    expect(buildDocument(slurry()).document!.releases[0]!.spilledVolumeM3).toBe(300);
  });
});

describe('a container at sea, from a click on open water', () => {
  it('becomes a valid document on the coast with the desalination intake', () => {
    let draft = placed(start('2031-08-02T03:00:00-08:00'), -117.43, -44.48);
    draft = chooseSubstance(draft, substance('phenol'), registers);
    draft = changeRelease(draft, 'r1', (release) => ({ ...release, amount: { how: 'mass', massKg: { low: 10_000, likely: 20_000, high: 20_000 }, activeFraction: 1 }, timing: { kind: 'steady', startS: 0, durationS: 12 * 3_600 } }));
    const { document, errors } = buildDocument(draft);
    expect(errors).toEqual([]);
    expect(document!.water).toMatchObject({ kind: 'open', waterKind: 'coast' });
    expect(document!.receptors.map((receptor) => receptor.code)).toEqual(expect.arrayContaining(['INT-4', 'BCH-1', 'AQ-1']));
  });
});

describe('what is missing or wrong', () => {
  it('asks for a release and a substance on an empty page', () => {
    expect(buildDocument(start('2031-05-12T06:40:00-08:00')).errors.map((error) => error.path)).toEqual(['releases', 'substance']);
  });

  it('names the amount by the path it has in the draft', () => {
    const draft = chooseSubstance(placed(start('2031-05-12T06:40:00-08:00'), -116.7321, -44.4305), substance('ammonia-solution'), registers);
    expect(errorsAt(buildDocument(draft).errors, 'releases.0.amount.massKg')).toBe('Give a number in kg');
  });

  it('keeps the position of a receptor in the draft when others are left out', () => {
    const draft = tanker();
    const first = draft.receptors[0]!;
    const wrong = { ...draft, leftOut: [first.id], receptors: draft.receptors.map((receptor, i) => (i === 1 ? { ...receptor, actionValues: [{ value: 0, basis: '', averagingS: 0, source: '', label: '' }] } : receptor)) };
    expect(buildDocument(wrong).errors[0]!.path).toBe('receptors.1.actionValues.0.value');
  });

  it('refuses a release on land and offers the nearest place on a river', () => {
    const outcome = placeRelease(start('2031-05-12T06:40:00-08:00'), [-116.79, -44.4], registers);
    expect('refused' in outcome && outcome.refused).toMatch(/on land or outside the registered waters, \d+\.\d km from River Ollemar/);
    expect('refused' in outcome && outcome.nearest?.channel?.reachId).toBe('ol-upper');
  });

  it('refuses a second release on another water', () => {
    const outcome = placeRelease(tanker(), [-117.43, -44.48], registers);
    expect('refused' in outcome && outcome.refused).toContain('covers one water');
  });

  it('reads a stored document as a draft and gives the same document back', () => {
    const { document } = buildDocument(tanker());
    expect(buildDocument(readDraft(document as unknown as Record<string, unknown>, '2031-01-01T00:00:00Z')).document).toEqual(document);
  });
});
