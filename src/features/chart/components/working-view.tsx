import { formatEntered, formatNumber } from '../../../../shared/format';
import type { EstimateResult, ReceptorAnswer, WorkingLine } from '../../../../shared/schemas/estimate-result';
import type { EstimateReceptor } from '../../../../shared/schemas/estimate';
import { DataTable } from '../../../components/data-table';

/** Where every figure comes from: formula, figures put in, value, source. */
export function WorkingView({ result, receptor, answer }: { result: EstimateResult; receptor: EstimateReceptor | null; answer: ReceptorAnswer | null }) {
  const { diagnostics } = result;
  return (
    <div className="flex flex-col gap-6">
      {receptor && answer && answer.working.length > 0 && <WorkingTable caption={`For ${receptor.code} ${receptor.name}`} lines={answer.working} />}
      <WorkingTable caption="For the whole estimate" lines={result.working} />
      <section>
        <h3 className="font-semibold">Books</h3>
        <p className="text-note text-ink2">
          Released {formatNumber(diagnostics.massReleased, 4)}, in the water {formatNumber(diagnostics.massInWater, 4)}, lost {formatNumber(diagnostics.massLost, 4)}, left the estimate {formatNumber(diagnostics.massLeft, 4)}{' '}
          {result.unit === 'kg/m3' ? 'kg' : 'organisms'}; not accounted for {formatNumber(diagnostics.massResidual * 100)} %. Error of the release-time integral {formatNumber(diagnostics.quadratureError)}. {diagnostics.cappedValues > 0 && `${formatEntered(diagnostics.cappedValues)} values capped at the solubility or at the spilled strength. `}
          Method {result.solver}, engine {result.engineVersion}, seed {result.seed}.
        </p>
      </section>
    </div>
  );
}

function WorkingTable({ caption, lines }: { caption: string; lines: readonly WorkingLine[] }) {
  return (
    <DataTable
      caption={caption}
      isCaptionShown
      rows={lines.map((line, i) => ({ ...line, i }))}
      rowKey={(line) => String(line.i)}
      empty="Nothing was reckoned here."
      columns={[
        { key: 'label', header: 'What', cell: (line) => line.label },
        { key: 'formula', header: 'Formula', cell: (line) => line.formula },
        { key: 'substituted', header: 'With figures', cell: (line) => line.substituted },
        { key: 'value', header: 'Result', align: 'end', cell: (line) => (line.value === null ? '–' : `${formatNumber(line.value, 3)} ${line.unit}`) },
        { key: 'source', header: 'Source', cell: (line) => <span className="text-note text-ink2">{line.source}</span> },
      ]}
    />
  );
}
