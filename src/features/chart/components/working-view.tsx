import { formatNumber } from '../../../../shared/format';
import type { EstimateResult, ReceptorAnswer, WorkingLine } from '../../../../shared/schemas/estimate-result';
import type { EstimateReceptor } from '../../../../shared/schemas/estimate';
import { DataTable } from '../../../components/data-table';
import { BooksView } from './books-view';

/** Where every figure comes from: formula, figures put in, value, source. */
export function WorkingView({ result, receptor, answer }: { result: EstimateResult; receptor: EstimateReceptor | null; answer: ReceptorAnswer | null }) {
  return (
    <div className="flex flex-col gap-6">
      {receptor && answer && answer.working.length > 0 && <WorkingTable caption={`For ${receptor.code} ${receptor.name}`} lines={answer.working} />}
      <WorkingTable caption="For the whole estimate" lines={result.working} />
      <BooksView result={result} />
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
