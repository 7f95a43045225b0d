import type { Amount } from '../../../shared/schemas/estimate';
import type { WorkingLine } from '../../../shared/schemas/estimate-result';
import { sig } from '../format';
import type { RunInput } from '../types';

/** How each release's amount came down to kilograms (or counts), and its timing and loss. */
export function amountWorking({ doc, releases, lossParts }: RunInput): WorkingLine[] {
  const unit = doc.substance.measure === 'count' ? 'organisms' : `kg${doc.substance.basis ? ` ${doc.substance.basis}` : ''}`;
  const lines = releases.map(({ release, amount, profile }): WorkingLine => {
    const range = amount.low !== null || amount.high !== null ? ` (low ${amount.low === null ? 'not given' : sig(amount.low)}, high ${amount.high === null ? 'not given' : sig(amount.high)})` : '';
    const timing = profile.isInstant ? `at once, ${sig(profile.startS)} s after T0` : `over ${sig(profile.stopS - profile.startS)} s from ${sig(profile.startS)} s after T0`;
    return {
      label: `Amount of ${release.name}`,
      formula: amount.formula,
      substituted: `${amountText(release.amount)}${range}, ${timing}`,
      value: amount.likely,
      unit,
      source: release.evidence || (amount.isStandIn ? 'stand-in for an unknown amount' : 'as entered'),
    };
  });
  const applied = doc.substance.applyLoss ? 'applied' : 'left out here, shown beside';
  lines.push(...lossParts.map(({ line }) => ({ ...line, substituted: `${line.substituted}; ${applied}` })));
  return lines;
}

function amountText(amount: Amount): string {
  switch (amount.how) {
    case 'mass':
      return `${sig(amount.massKg.likely)} kg × ${sig(amount.activeFraction)}`;
    case 'volume-strength':
      return `${sig(amount.volumeM3.likely)} m³ × ${sig(amount.strengthKgM3)} kg/m³`;
    case 'volume-density':
      return `${sig(amount.volumeM3.likely)} m³ × ${sig(amount.densityKgM3)} kg/m³ × ${sig(amount.activeFraction)}`;
    case 'count':
      return sig(amount.count.likely);
    case 'volume-count':
      return `${sig(amount.volumeM3.likely)} m³ × ${sig(amount.countPerM3)} per m³`;
    case 'unknown':
      return amount.standIn === null ? 'not known: 1 kg' : `not known: ${sig(amount.standIn)} kg`;
  }
}
