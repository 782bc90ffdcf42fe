import { Sheet } from '../../components/ui/Sheet';
import { Table } from '../../components/ui/Table';
import { energy } from '../../drawings/numbers';
import type { SiteFigures } from '../../schemas/api/figures';
import { importedSheet } from '../../words/figures';

/** What imported files say of days of which nothing was measured here: shown apart, and part of no figure above. */
export function ImportedSheet({ days, label }: { days: SiteFigures['imported']; label: string }) {
  const sum = days.reduce((total, d) => total + d.energyKWh, 0);
  const dc = days.every((d) => d.side === 'dc');
  return (
    <Sheet
      id="imported"
      className="mt-5"
      flush
      title={importedSheet.importedOn(sum, days.length)}
      aside={dc ? importedSheet.dcFromTheStrings : importedSheet.fromAFile}
    >
      <p className="max-w-[76ch] text-[15px] text-ink-2">{importedSheet.wakelineMeasuredNothingOn(label)}</p>
      <details className="mt-2">
        <summary className="target cursor-pointer text-petrol">{importedSheet.asATable}</summary>
        <Table
          caption={importedSheet.importedDaysOf(label)}
          rows={days}
          rowKey={(d) => d.day}
          columns={[
            { key: 'day', label: importedSheet.day, cell: (d) => d.day },
            {
              key: 'energy',
              label: importedSheet.energy,
              numeric: true,
              cell: (d) => energy(d.energyKWh * 1000),
            },
            {
              key: 'side',
              label: importedSheet.where,
              cell: (d) => (d.side === 'ac' ? importedSheet.invertersAc : importedSheet.stringsDc),
            },
          ]}
        />
      </details>
    </Sheet>
  );
}
