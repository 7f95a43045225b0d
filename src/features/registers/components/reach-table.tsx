import { formatEntered } from '../../../../shared/format';
import type { Reach } from '../../../../shared/schemas/estimate';
import { DataTable, type Column } from '../../../components/data-table';
import { StatusWord } from '../../../components/status-word';

type Row = { index: number; reach: Reach };
type Props = { reaches: readonly Reach[]; openIndex: number; onOpen: (index: number) => void; problemsOf: (index: number) => number };

const km = (reach: Reach, at: 0 | -1): number => reach.centreline.at(at)?.[2] ?? Number.NaN;
const kmText = (value: number): string => (Number.isFinite(value) ? formatEntered(value) : 'not drawn');

/** All reaches at a glance; one of them is open below. */
export function ReachTable({ reaches, openIndex, onOpen, problemsOf }: Props) {
  const nameOf = (id: string | null): string => (id === null ? 'out of the network' : (reaches.find((reach) => reach.id === id)?.name ?? id));
  const columns: Column<Row>[] = [
    { key: 'name', header: 'Reach', cell: ({ reach }) => reach.name || 'Unnamed reach' },
    { key: 'from', header: 'From, km', align: 'end', cell: ({ reach }) => kmText(km(reach, 0)) },
    { key: 'to', header: 'To, km', align: 'end', cell: ({ reach }) => kmText(km(reach, -1)) },
    { key: 'into', header: 'Flows into', cell: ({ reach }) => `${nameOf(reach.downstreamReachId)}${reach.joinsOnBank ? `, ${reach.joinsOnBank} bank` : ''}` },
    { key: 'depth', header: 'Depth at the usual flow, m', align: 'end', cell: ({ reach }) => (reach.hydraulics[0]?.depthM == null ? '' : formatEntered(reach.hydraulics[0].depthM)) },
    {
      key: 'state', header: 'State',
      cell: ({ index, reach }) => {
        const count = problemsOf(index);
        if (count > 0) return <StatusWord tone="bad">{`${count} to mend`}</StatusWord>;
        return reach.calibrated ? <StatusWord tone="good">calibrated</StatusWord> : <StatusWord>not calibrated</StatusWord>;
      },
    },
  ];
  return <DataTable caption="Table of reaches" columns={columns} rows={reaches.map((reach, index) => ({ index, reach }))} rowKey={({ index }) => String(index)} selectedKey={String(openIndex)} onRow={({ index }) => onOpen(index)} />;
}
