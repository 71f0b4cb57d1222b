import { render, screen, within } from '@testing-library/react';
import userEvent from '@testing-library/user-event';
import { Table, type TableColumn } from '@/components/ui/Table';
import { Text } from '@/components/ui/Text';

interface Row {
  title: string;
  paprDb: number;
}
const rows: Row[] = [
  { title: 'Echo test', paprDb: 9.72 },
  { title: 'Wide 100 MHz', paprDb: 11.27 },
  { title: 'Comb', paprDb: 10.47 },
];
const columns: TableColumn<Row>[] = [
  { key: 'title', label: 'Title', sortBy: (row) => row.title, cell: (row) => <a href="#row">{row.title}</a> },
  {
    key: 'papr',
    label: 'PAPR, dB',
    isFigure: true,
    sortBy: (row) => row.paprDb,
    cell: (row) => <Text>{row.paprDb}</Text>,
  },
  { key: 'state', label: 'State', cell: () => <Text>Draft</Text> },
];
const titles = () =>
  screen
    .getAllByRole('row')
    .slice(1)
    .map((row) => within(row).getAllByRole('cell')[0]!.textContent);

describe('Table', () => {
  it('sorts by its heads and says so; figures fall first, words rise first', async () => {
    render(<Table label="Waveforms" columns={columns} rows={rows} keyOf={(row) => row.title} />);
    expect(titles()).toEqual(['Echo test', 'Wide 100 MHz', 'Comb']);
    const papr = screen.getByRole('columnheader', { name: 'PAPR, dB' });
    expect(papr).toHaveAttribute('aria-sort', 'none');
    await userEvent.click(screen.getByRole('button', { name: 'PAPR, dB' }));
    expect(papr).toHaveAttribute('aria-sort', 'descending');
    expect(titles()).toEqual(['Wide 100 MHz', 'Comb', 'Echo test']);
    await userEvent.click(screen.getByRole('button', { name: 'Title' }));
    expect(papr).toHaveAttribute('aria-sort', 'none');
    expect(titles()).toEqual(['Comb', 'Echo test', 'Wide 100 MHz']);
    expect(screen.queryByRole('button', { name: 'State' })).toBeNull();
  });

  it('goes from row to row by arrows and opens by a press anywhere but on a control', async () => {
    const onOpen = jest.fn();
    render(<Table label="Waveforms" columns={columns} rows={rows} keyOf={(row) => row.title} onOpen={onOpen} />);
    const [first, second] = screen.getAllByRole('link');
    first!.focus();
    await userEvent.keyboard('{ArrowDown}');
    expect(second).toHaveFocus();
    await userEvent.keyboard('{ArrowUp}');
    expect(first).toHaveFocus();
    await userEvent.click(first!);
    expect(onOpen).not.toHaveBeenCalled();
    await userEvent.click(screen.getByText('11.27'));
    expect(onOpen).toHaveBeenCalledWith(rows[1]);
  });
});
