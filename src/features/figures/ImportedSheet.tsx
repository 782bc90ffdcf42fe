import { Sheet } from '../../components/ui/Sheet';
import { Table } from '../../components/ui/Table';
import { counted, energy } from '../../drawings/numbers';
import type { SiteFigures } from '../../schemas/api/figures';

/** What imported files say of days of which nothing was measured here: shown apart, and part of no figure above. */
export function ImportedSheet({ days, label }: { days: SiteFigures['imported']; label: string }) {
  const sum = days.reduce((total, d) => total + d.energyKWh, 0);
  const dc = days.every((d) => d.side === 'dc');
  return (
    <Sheet
      id="imported"
      className="mt-5"
      flush
      title={`Imported: ${energy(sum * 1000)} on ${counted(days.length, 'day')}`}
      aside={dc ? 'DC, from the strings' : 'from a file'}
    >
      <p className="max-w-[76ch] text-[15px] text-ink-2">
        Wakeline measured nothing on these days of {label}: they come from an imported file, unchecked, and
        count in no figure or ratio of this page.
      </p>
      <details className="mt-2">
        <summary className="target cursor-pointer text-petrol">As a table</summary>
        <Table
          caption={`Imported days of ${label}`}
          rows={days}
          rowKey={(d) => d.day}
          columns={[
            { key: 'day', label: 'Day', cell: (d) => d.day },
            { key: 'energy', label: 'Energy', numeric: true, cell: (d) => energy(d.energyKWh * 1000) },
            { key: 'side', label: 'Where', cell: (d) => (d.side === 'ac' ? 'inverters, AC' : 'strings, DC') },
          ]}
        />
      </details>
    </Sheet>
  );
}
