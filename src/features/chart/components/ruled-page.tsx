import { useState } from 'react';
import type { Measure } from '../../../../shared/format';
import { EstimateCaution } from '../../../components/estimate-caution';
import { FieldError } from '../../../components/field';
import { useChart } from '../hooks/chart-context';
import { buildDocument } from '../model/build-document';
import type { Clock } from '../model/arrival-words';
import type { Forecast } from '../model/forecast';
import { ChecksPanel, checksSummary } from './checks-panel';
import { CoefficientsPanel, coefficientSummary } from './coefficients-panel';
import { ReceptorsPanel, type Rows } from './receptors-panel';
import { ReleasePanel, releaseWords } from './release-panel';
import { SecondOpinionView } from './second-opinion';
import { Section } from './section';
import { waterSummary, WaterPanel } from './water-panel';

type Props = { forecast: Forecast | null; rows: Rows; clock: Clock; measure: Measure; isBehind: boolean; selectedId: string | null; onSelect: (id: string) => void };

/** The ruled page beside the map: a single scroll, each part opens in place. */
export function RuledPage({ forecast, rows, clock, measure, isBehind, selectedId, onSelect }: Props) {
  const { draft, errors } = useChart();
  const has = (start: string) => errors.some((error) => error.path === start || error.path.startsWith(`${start}.`));
  const hasCoefficientError = ['water.mixing', 'water.mixingDepthM', 'water.depthM'].some(has);
  const isFirst = draft.releases.length === 0;
  // Who opens a finished scenario wants its answers; who starts one wants the fields.
  const [isNew] = useState(() => !buildDocument(draft).document);
  const checks = forecast?.result?.checks ?? null;
  return (
    <>
      <Section title="Release" summary={isFirst ? '' : draft.releases.map((release) => releaseWords(draft, release)).join('; ')} isOpenFirst={isNew} hasError={has('releases') || has('substance') || has('startAt')}>
        <ReleasePanel />
      </Section>
      <Section title="Water and flow" summary={waterSummary(draft)} hasError={(has('water') && !hasCoefficientError) || has('horizonS')}>
        <WaterPanel />
      </Section>
      <Section title="Coefficients" summary={coefficientSummary(draft)} hasError={hasCoefficientError}>
        <CoefficientsPanel />
      </Section>
      <Section title="Checks" summary={checksSummary(checks)}>
        <ChecksPanel checks={checks} />
        {checks && (
          <div className="mt-3 border-t border-rule pt-3">
            <SecondOpinionView result={forecast?.result ?? null} receptors={rows.map((row) => row.receptor)} clock={clock} />
          </div>
        )}
      </Section>
      <Section title="Receptors by arrival" summary={rows.length > 0 ? `${rows.length} on the water` : ''} isOpenFirst hasError={has('receptors')}>
        <ReceptorsPanel rows={rows} clock={clock} measure={measure} selectedId={selectedId} onSelect={onSelect} isBehind={isBehind} />
      </Section>
      <OtherErrors />
      <EstimateCaution className="px-4 py-3" />
    </>
  );
}

/** What has no field of its own on this page is still said. */
function OtherErrors() {
  const { errors } = useChart();
  const homeless = errors.filter((error) => !/^(releases|substance|startAt|horizonS|receptors|water)(\.|$)/.test(error.path));
  return (
    <>
      {homeless.map((error) => (
        <div key={error.path} className="px-4 py-2">
          <FieldError>{`${error.path}: ${error.message}`}</FieldError>
        </div>
      ))}
    </>
  );
}
