import type { ReactNode } from 'react';
import { Sheet } from '../../components/ui/Sheet';
import { Formula } from './math';
import type { Note } from './note';
import { methodSheet } from '../../words/methods';

/** One judgement: what it computes, the formula, its source, its limits; the live example comes as children. */
export function MethodSheet({ note, children }: { note: Note; children?: ReactNode }) {
  return (
    <Sheet id={note.key} title={note.title} className="scroll-mt-4">
      <div className="grid gap-x-10 gap-y-5 lg:grid-cols-2">
        <div className="min-w-0">
          <p className="text-[15px] leading-[22px]">{note.computes}</p>
          <div className="my-3 border-y border-rule-faint py-1">
            {note.formulas.map((formula) => (
              <Formula key={formula.label} label={formula.label}>
                {formula.set}
              </Formula>
            ))}
          </div>
          {note.where && <p className="text-ink-2">{note.where}</p>}
          <h3 className="mt-3 font-semibold">{methodSheet.source}</h3>
          <ul className="list-disc pl-5 text-ink-2">
            {note.sources.map((source) => (
              <li key={source}>{source}</li>
            ))}
          </ul>
          <h3 className="mt-3 font-semibold">{methodSheet.limits}</h3>
          <ul className="list-disc pl-5 text-ink-2">
            {note.limits.map((limit) => (
              <li key={limit}>{limit}</li>
            ))}
          </ul>
        </div>
        <div className="min-w-0">{children}</div>
      </div>
    </Sheet>
  );
}
