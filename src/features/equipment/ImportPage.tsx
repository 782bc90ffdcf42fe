import { useRef, useState } from 'react';
import { Button, ButtonLink } from '../../components/ui/Button';
import { Heading } from '../../components/ui/Heading';
import { Notice } from '../../components/ui/Notice';
import { Sheet } from '../../components/ui/Sheet';
import type { EquipmentFamily } from '../../domain/equipment/families';
import { headerOf } from '../../domain/equipment/fields';
import { FIELDS } from '../../domain/equipment/plausibility';
import { ApiError, api } from '../../lib/api';
import type { ImportPreview } from '../../schemas/api/equipment';
import { paths } from '../../schemas/paths';
import { PreviewSheet } from './PreviewSheet';
import { FAMILY_LABELS, ONE } from '../../words/equipment-sentences';
import { importPage } from '../../words/equipment-import';

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
      heading: importPage.importFromFile(one),
      sentence: importPage.theFirstRowNames,
    };
  const { counts, headerFaults } = state.preview;
  if (state.step === 'imported')
    return {
      heading: importPage.newChanged(counts.new, counts.changed),
      sentence: importPage.saidWhatTheCatalogue(counts.unchanged),
    };
  if (headerFaults.length > 0)
    return {
      heading: importPage.theColumnsCantBe,
      sentence: importPage.correctTheFirstRow,
    };
  if (counts.faulty > 0)
    return {
      heading: importPage.ofRowsCantBe(counts.faulty, state.preview.rows.length),
      sentence: importPage.correctTheMarkedCells,
    };
  if (counts.new + counts.changed === 0)
    return {
      heading: importPage.theCatalogueSaysAll,
      sentence: importPage.readNothingToChange(counts.unchanged),
    };
  return {
    heading: importPage.newToChange(counts.new, counts.changed),
    sentence: importPage.alreadyThereAndThe(counts.unchanged),
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
        message: importPage.hasKbImportAt(chosen.name, Math.ceil(chosen.size / 1000), MOST_BYTES),
      });
      return;
    }
    const rows = await chosen.text();
    if (rows.includes('\u0000')) {
      setState({
        step: 'failed',
        message: importPage.isNoTextSave(chosen.name),
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
          { label: importPage.equipment, href: paths.equipment() },
          { label: FAMILY_LABELS[family], href: paths.equipmentList(family) },
        ]}
        finding={heading}
        sentence={sentence}
      />
      <div className="grid gap-5">
        {state.step === 'failed' && (
          <Notice kind="failed" title={importPage.notRead}>
            {state.message}
          </Notice>
        )}
        {state.step === 'imported' && (
          <Notice
            kind="done"
            title={importPage.imported}
            action={<ButtonLink href={paths.equipmentList(family)}>{importPage.toTheList}</ButtonLink>}
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
                  {importPage.importN(state.preview.counts.new, state.preview.counts.changed)}
                </Button>
              )
            }
          />
        )}
        {state.step !== 'imported' && (
          <Sheet title={importPage.rows} id="rows">
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
                {importPage.chooseAFile}
              </Button>
              <ButtonLink href={paths.api.equipmentCsv(family)} download>
                {importPage.downloadTheListAs}
              </ButtonLink>
            </div>
            <label htmlFor="pasted" className="mb-1 block font-medium">
              {importPage.orPasteTheCells}
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
                {state.step === 'looking'
                  ? importPage.looking
                  : preview
                    ? importPage.lookAgain
                    : importPage.lookAtTheRows}
              </Button>
              {busy && <span role="status">{importPage.everyRowIsBeing}</span>}
            </div>
            <details className="mt-4 text-ink-2">
              <summary className="target cursor-pointer py-3">{importPage.columnsThatAreUnderstood}</summary>
              <p>{importPage.decimalPointsOrCommas(FIELDS[family].map(headerOf).join(' · '))}</p>
            </details>
          </Sheet>
        )}
      </div>
    </>
  );
}
