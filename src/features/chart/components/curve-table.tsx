import { formatClock, formatConcentration, formatElapsed, type Measure } from '../../../../shared/format';
import type { EstimateReceptor } from '../../../../shared/schemas/estimate';
import type { ReceptorAnswer } from '../../../../shared/schemas/estimate-result';
import { DataTable } from '../../../components/data-table';
import { tableRows } from '../model/curve';

const MOST_ROWS = 60;

/** The curve in figures, for those who cannot see it and for copying. */
export function CurveTable({ receptor, answer, measure, startMs, offset }: { receptor: EstimateReceptor; answer: ReceptorAnswer; measure: Measure; startMs: number; offset: string }) {
  const { series } = answer;
  const write = (values: readonly number[] | null) => (i: number) => {
    if (!values) return '–';
    const { text, unit } = formatConcentration(values[i]!, measure);
    return `${text} ${unit}`;
  };
  return (
    <details className="mt-2 print:hidden">
      <summary className="min-h-9 py-1 font-semibold text-kingfisher">Show as a table</summary>
      <DataTable
        caption={`Concentration at ${receptor.code} ${receptor.name} over time`}
        rows={tableRows(series, MOST_ROWS)}
        rowKey={String}
        columns={[
          { key: 'clock', header: 'Time', cell: (i) => formatClock(startMs + series.timesS[i]! * 1_000, offset) },
          { key: 'elapsed', header: 'Elapsed', cell: (i) => formatElapsed(series.timesS[i]!) },
          { key: 'low', header: 'Low', align: 'end', cell: write(series.low) },
          { key: 'likely', header: 'Likely', align: 'end', cell: write(series.likely) },
          { key: 'high', header: 'High', align: 'end', cell: write(series.high) },
        ]}
      />
    </details>
  );
}
