import { formatOffset, type Measure } from '../../../../shared/format';
import { DataTable, type Column } from '../../../components/data-table';
import { ReceptorPlate } from '../../../map/receptor-plate';
import { plateStateOf } from '../../../map/receptor-plates';
import { arrivalWords, sayConcentration, sayDose, sayRange, type Clock, type Written, writeTime } from '../model/arrival-words';
import { decidingAnswer, earliestS } from '../model/rail-lanes';
import type { Rows } from './receptors-panel';

type Row = Rows[number];

const At = ({ at }: { at: Written | null }) =>
  at === null ? (
    '–'
  ) : (
    <span className="whitespace-nowrap">
      {at.clock}
      <span className="block text-note text-ink2">{at.elapsed}</span>
    </span>
  );

/** Paper is narrow: these can be read off the rest. */
const leftOutOfPrint = ['peakAt', 'dose'];

/** Every receptor with all its figures in one wide table, by arrival; also what prints. */
export function ArrivalTable({ rows, clock, measure, selectedId, onSelect, isPrinted = false }: { rows: Rows; clock: Clock; measure: Measure; selectedId: string | null; onSelect?: (id: string) => void; isPrinted?: boolean }) {
  const words = (row: Row) => {
    const deciding = row.answer ? decidingAnswer(row.answer) : null;
    return deciding?.verdict === 'may exceed' ? arrivalWords(clock, deciding) : null;
  };
  const value = (row: Row) => {
    const deciding = row.answer ? decidingAnswer(row.answer) : null;
    const stated = deciding ? row.receptor.actionValues[deciding.index] : undefined;
    return deciding ? (
      <>
        {sayConcentration(deciding.value, measure)} {stated?.basis}
        <span className="block text-note text-ink2">{stated?.source}</span>
      </>
    ) : (
      'none for this substance'
    );
  };
  const columns: Column<Row>[] = [
    {
      key: 'receptor',
      header: 'Receptor',
      className: 'min-w-52 print:min-w-0',
      cell: (row) => (
        <span className="inline-flex items-center gap-2">
          <span className="shrink-0">
            <ReceptorPlate kind={row.receptor.kind} number={row.number} state={plateStateOf(row.answer ?? undefined)} size={24} />
          </span>
          {row.receptor.code} {row.receptor.name}
        </span>
      ),
    },
    { key: 'verdict', header: 'Verdict', cell: (row) => row.answer?.verdict ?? 'not solved yet' },
    { key: 'earliest', header: <span>Earliest arrival<span className="block font-normal">{formatOffset(clock.offset)}</span></span>, cell: (row) => <strong className="font-semibold"><At at={words(row)?.earliest ?? null} /></strong>, sortValue: (row) => (row.answer && decidingAnswer(row.answer) ? earliestS(decidingAnswer(row.answer)!) : null) },
    { key: 'likely', header: 'Likely', cell: (row) => <At at={words(row)?.likely ?? null} /> },
    { key: 'latest', header: 'Latest', cell: (row) => <At at={words(row)?.latest ?? null} /> },
    { key: 'peak', header: 'Peak', className: 'min-w-36 print:min-w-0', cell: (row) => (row.answer ? sayRange(row.answer.peak, measure) : '–'), sortValue: (row) => row.answer?.peak.likely ?? null },
    { key: 'peakAt', header: 'Peak at', cell: (row) => <At at={writeTime(clock, row.answer?.peakS ?? null, 'early')} /> },
    { key: 'end', header: 'End', cell: (row) => (words(row)?.endOpen ? 'beyond the estimate' : <At at={words(row)?.end ?? null} />) },
    { key: 'above', header: 'Time above', className: 'min-w-24 print:min-w-0', cell: (row) => words(row)?.timeAbove ?? '–' },
    { key: 'dose', header: 'Dose', cell: (row) => sayDose(row.answer?.dose.high ?? row.answer?.dose.likely ?? null, measure) },
    { key: 'action', header: 'Action value', className: 'min-w-44 print:min-w-0', cell: value },
  ];
  return (
    <DataTable
      caption="Receptors by arrival"
      rows={rows}
      rowKey={(row) => row.receptor.id}
      {...(onSelect ? { onRow: (row: Row) => onSelect(row.receptor.id) } : {})}
      selectedKey={selectedId}
      empty="No receptor on this water."
      columns={columns.filter((column) => !isPrinted || !leftOutOfPrint.includes(column.key))}
    />
  );
}
