import { fireEvent, render, screen, within } from '@testing-library/react';
import { describe, expect, it, vi } from 'vitest';
import { DataTable, type Column } from './data-table';

type Row = { code: string; peak: number | null };
const rows: Row[] = [
  { code: 'INT-10', peak: 4.4 },
  { code: 'INT-2', peak: null },
  { code: 'INT-1', peak: 26 },
];
const columns: Column<Row>[] = [
  { key: 'code', header: 'Code', cell: (row) => row.code, sortValue: (row) => row.code },
  { key: 'peak', header: 'Peak, mg/l', cell: (row) => row.peak ?? 'no estimate', sortValue: (row) => row.peak, align: 'end' },
];
const codes = () => screen.getAllByRole('row').slice(1).map((row) => within(row).getAllByRole('cell')[0]!.textContent);

describe('a table', () => {
  it('sorts up, down and back to the order it was given, with empty values last either way', () => {
    render(<DataTable caption="Receptors" columns={columns} rows={rows} rowKey={(row) => row.code} />);
    const peak = screen.getByRole('button', { name: 'Peak, mg/l' });
    fireEvent.click(peak);
    expect(codes()).toEqual(['INT-10', 'INT-1', 'INT-2']);
    expect(screen.getByRole('columnheader', { name: 'Peak, mg/l' }).getAttribute('aria-sort')).toBe('ascending');
    fireEvent.click(peak);
    expect(codes()).toEqual(['INT-1', 'INT-10', 'INT-2']);
    fireEvent.click(peak);
    expect(codes()).toEqual(['INT-10', 'INT-2', 'INT-1']);
  });

  it('sorts numbers inside codes as numbers', () => {
    render(<DataTable caption="Receptors" columns={columns} rows={rows} rowKey={(row) => row.code} />);
    fireEvent.click(screen.getByRole('button', { name: 'Code' }));
    expect(codes()).toEqual(['INT-1', 'INT-2', 'INT-10']);
  });

  it('opens a row once, whether its button or the rest of it is pressed', () => {
    const open = vi.fn();
    render(<DataTable caption="Receptors" columns={columns} rows={rows} rowKey={(row) => row.code} onRow={open} />);
    fireEvent.click(screen.getByRole('button', { name: 'INT-2' }));
    fireEvent.click(screen.getByText('26'));
    expect(open.mock.calls.map(([row]) => (row as Row).code)).toEqual(['INT-2', 'INT-1']);
  });
});
