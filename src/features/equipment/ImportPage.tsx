import { useRef, useState } from 'react';
import { Button, ButtonLink } from '../../components/ui/Button';
import { Heading } from '../../components/ui/Heading';
import { Notice } from '../../components/ui/Notice';
import { Sheet } from '../../components/ui/Sheet';
import type { EquipmentFamily } from '../../domain/equipment/families';
import { headerOf } from '../../domain/equipment/fields';
import { FIELDS } from '../../domain/equipment/plausibility';
import { counted, countAtStart } from '../../drawings/numbers';
import { ApiError, api } from '../../lib/api';
import type { ImportPreview } from '../../schemas/api/equipment';
import { paths } from '../../schemas/paths';
import { PreviewSheet } from './PreviewSheet';
import { FAMILY_LABELS, ONE } from './words';

const MOST_BYTES = 200_000;

type Step =
  | { step: 'choosing' }
  | { step: 'looking' }
  | { step: 'failed'; message: string }
  | { step: 'previewed' | 'importing' | 'imported'; preview: ImportPreview };

function finding(family: EquipmentFamily, state: Step): { heading: string; sentence: string } {
  const one = ONE[family];
  if (!('preview' in state))
    return {
      heading: `Import ${one}s from a file`,
      sentence:
        'The first row names the columns. Every row is looked at before anything is written: all of it is imported, or nothing.',
    };
  const { counts, headerFaults } = state.preview;
  if (state.step === 'imported')
    return {
      heading: `${countAtStart(counts.new)} new, ${counts.changed} changed`,
      sentence: `${counted(counts.unchanged, 'row')} said what the catalogue says already. The same file once more would change nothing.`,
    };
  if (headerFaults.length > 0)
    return {
      heading: 'The columns can’t be read as they are',
      sentence: 'Correct the first row, then look again. Nothing was written.',
    };
  if (counts.faulty > 0)
    return {
      heading: `${countAtStart(counts.faulty)} of ${state.preview.rows.length} rows can’t be imported`,
      sentence: 'Correct the marked cells in the file or below, then look again. Nothing was written.',
    };
  if (counts.new + counts.changed === 0)
    return {
      heading: 'The catalogue says all of this already',
      sentence: `${countAtStart(counts.unchanged)} ${counts.unchanged === 1 ? 'row' : 'rows'} read, nothing to change.`,
    };
  return {
    heading: `${countAtStart(counts.new)} new, ${counts.changed} to change`,
    sentence: `${counted(counts.unchanged, 'row')} already there and the same. Look through what would change, then import.`,
  };
}

/** Types from a file or from the clipboard: look, correct, import. */
export function ImportPage({ family }: { family: EquipmentFamily }) {
  const [text, setText] = useState('');
  const [state, setState] = useState<Step>({ step: 'choosing' });
  const file = useRef<HTMLInputElement>(null);
  const { heading, sentence } = finding(family, state);

  const send = async (rows: string, confirm?: string) => {
    try {
      const preview = await api<ImportPreview>(paths.api.equipmentImport(family), {
        method: 'POST',
        body: confirm === undefined ? { text: rows } : { text: rows, confirm },
      });
      setState({ step: preview.imported ? 'imported' : 'previewed', preview });
    } catch (error) {
      if (!(error instanceof ApiError)) throw error;
      setState({ step: 'failed', message: error.message });
    }
  };
  const look = async (rows: string) => {
    setState({ step: 'looking' });
    await send(rows);
  };
  const readFile = async (chosen: File | undefined) => {
    if (!chosen) return;
    if (chosen.size > MOST_BYTES) {
      setState({
        step: 'failed',
        message: `${chosen.name} has ${Math.ceil(chosen.size / 1000)} kB. Import at most ${MOST_BYTES / 1000} kB at once: a catalogue is a short list.`,
      });
      return;
    }
    const rows = await chosen.text();
    if (rows.includes('\u0000')) {
      setState({
        step: 'failed',
        message: `${chosen.name} is no text. Save the spreadsheet as CSV, or copy its cells and paste them here.`,
      });
      return;
    }
    setText(rows);
    await look(rows);
  };
  const preview = 'preview' in state ? state.preview : null;
  const importable =
    state.step === 'previewed' &&
    state.preview.headerFaults.length === 0 &&
    state.preview.counts.faulty === 0 &&
    state.preview.counts.new + state.preview.counts.changed > 0;
  const busy = state.step === 'looking' || state.step === 'importing';

  return (
    <>
      <Heading
        crumbs={[
          { label: 'Equipment', href: paths.equipment() },
          { label: FAMILY_LABELS[family], href: paths.equipmentList(family) },
        ]}
        finding={heading}
        sentence={sentence}
      />
      <div className="grid gap-5">
        {state.step === 'failed' && (
          <Notice kind="failed" title="Not read">
            {state.message}
          </Notice>
        )}
        {state.step === 'imported' && (
          <Notice
            kind="done"
            title="Imported"
            action={<ButtonLink href={paths.equipmentList(family)}>To the list</ButtonLink>}
          />
        )}
        {preview && (
          <PreviewSheet
            preview={preview}
            actions={
              importable && (
                <Button
                  weight="primary"
                  onClick={() => {
                    setState({ step: 'importing', preview: state.preview });
                    void send(text, state.preview.fingerprint);
                  }}
                >
                  Import {counted(state.preview.counts.new + state.preview.counts.changed, 'row')}
                </Button>
              )
            }
          />
        )}
        {state.step !== 'imported' && (
          <Sheet title="Rows" id="rows">
            <div className="mb-3 flex flex-wrap items-center gap-3">
              <input
                ref={file}
                type="file"
                accept=".csv,.tsv,.txt,text/csv,text/plain,text/tab-separated-values"
                className="sr-only"
                tabIndex={-1}
                aria-hidden="true"
                onChange={(event) => {
                  const chosen = event.target.files?.[0];
                  event.target.value = '';
                  void readFile(chosen);
                }}
              />
              <Button disabled={busy} onClick={() => file.current?.click()}>
                Choose a file
              </Button>
              <ButtonLink href={paths.api.equipmentCsv(family)} download>
                Download the list as a pattern
              </ButtonLink>
            </div>
            <label htmlFor="pasted" className="mb-1 block font-medium">
              Or paste the cells of a spreadsheet, with the row of column names
            </label>
            <textarea
              id="pasted"
              rows={8}
              spellCheck={false}
              value={text}
              onChange={(event) => setText(event.target.value)}
              className="w-full overflow-x-auto whitespace-pre rounded border border-rule bg-sheet p-3 text-[14px] leading-5"
            />
            <div className="mt-3 flex flex-wrap items-center gap-3">
              <Button
                weight={preview ? 'plain' : 'primary'}
                disabled={busy || text.trim() === ''}
                onClick={() => void look(text)}
              >
                {state.step === 'looking' ? 'Looking…' : preview ? 'Look again' : 'Look at the rows'}
              </Button>
              {busy && <span role="status">Every row is being read…</span>}
            </div>
            <details className="mt-4 text-ink-2">
              <summary className="target cursor-pointer py-3">Columns that are understood</summary>
              <p>
                {FIELDS[family].map(headerOf).join(' · ')}. Decimal points or commas; separated by comma,
                semicolon or tab. Columns that a type has already may be left out.
              </p>
            </details>
          </Sheet>
        )}
      </div>
    </>
  );
}
