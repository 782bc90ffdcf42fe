import { useState } from 'react';
import { Button, ButtonLink } from '../../components/ui/Button';
import { Heading } from '../../components/ui/Heading';
import { Notice } from '../../components/ui/Notice';
import type { ImportPage } from '../../schemas/api/import';
import { paths } from '../../schemas/paths';
import { ChangesSheet } from './ChangesSheet';
import { ColumnsSheet } from './ColumnsSheet';
import { DecisionsSheet } from './DecisionsSheet';
import { FaultsSheet } from './FaultsSheet';
import { FileSheet } from '../../components/table-file/FileSheet';
import { ProgressLine } from '../../components/table-file/ProgressLine';
import { faultsOf, useImport } from './use-import';
import { finding } from '../../words/import-sentences';
import { importAsBuilt } from '../../words/import';

/** Strings and serials from a file: read, matched, checked, looked at, and then written all at once. */
export function ImportAsBuilt({ initial }: { initial: ImportPage }) {
  const work = useImport(initial);
  const { facts, match, checked, outcome, error, busy } = work;
  const [reason, setReason] = useState('');
  const [reasonFault, setReasonFault] = useState<string | null>(null);
  const site = initial.site.id;
  const said = finding({
    rows: facts?.rows ?? null,
    missing: work.missing,
    faults: checked?.faults ?? null,
    outcome,
  });
  const refused = error ? faultsOf(error) : [];
  const clashes = outcome && outcome.faultCount > 0 ? outcome.faults : refused;
  const changes = outcome ? Object.values(outcome.counts).reduce((a, b) => a + b, 0) : 0;
  const send = () => {
    const why = reason.trim();
    setReasonFault(why.length < 3 ? importAsBuilt.sayWhyInA : null);
    if (why.length >= 3) work.apply(why);
  };
  return (
    <>
      <Heading
        crumbs={[
          { label: importAsBuilt.commissioning, href: paths.commissioning() },
          { label: initial.site.name, href: paths.commissioningSite(site) },
          { label: importAsBuilt.asBuilt, href: paths.asBuilt(site) },
          { label: importAsBuilt.import },
        ]}
        finding={said.heading}
        sentence={said.sentence}
      />
      <p className="sr-only" role="status">
        {said.heading}
      </p>
      <div className="grid gap-6">
        {busy && (
          <ProgressLine
            words={busy.words}
            share={busy.share}
            onStop={busy.stop ?? undefined}
            stopWords={importAsBuilt.stopKeepTheAs}
          />
        )}
        {error && (
          <Notice
            kind="failed"
            title={error.title}
            action={<Button onClick={work.check}>{importAsBuilt.checkTheFileAgain}</Button>}
          >
            {error.message}
          </Notice>
        )}
        {outcome?.written && (
          <Notice
            kind="done"
            title={importAsBuilt.allOfItIs}
            action={
              <span className="flex flex-wrap gap-2">
                <ButtonLink href={paths.asBuilt(site)}>{importAsBuilt.lookAtTheAs}</ButtonLink>
                <ButtonLink href={paths.roofPlan(site)}>{importAsBuilt.layTheStringsOn}</ButtonLink>
                <ButtonLink href={paths.asBuiltHistory(site)}>{importAsBuilt.history}</ButtonLink>
              </span>
            }
          >
            {importAsBuilt.theSameFileOnce}
          </Notice>
        )}
        {outcome && !outcome.written && outcome.faultCount === 0 && changes === 0 && (
          <Notice
            kind="done"
            title={importAsBuilt.theAsBuiltSays}
            action={<ButtonLink href={paths.asBuilt(site)}>{importAsBuilt.lookAtTheAs}</ButtonLink>}
          />
        )}
        {!outcome?.written && outcome && outcome.faultCount === 0 && changes > 0 && (
          <ChangesSheet
            outcome={outcome}
            reason={reason}
            onReason={(text) => {
              setReason(text);
              setReasonFault(null);
            }}
            reasonFault={reasonFault}
            busy={busy !== null}
            onImport={send}
          />
        )}
        {/* while rows are being written nothing may change what is written */}
        <div className="grid gap-6" inert={busy?.stop ? true : undefined}>
          {checked && !outcome?.written && (
            <DecisionsSheet
              site={site}
              names={initial.names}
              checked={checked}
              choices={work.choices}
              onChoices={work.setChoices}
            />
          )}
          {clashes.length > 0 && checked && (
            <FaultsSheet
              key="as-built"
              by="as-built"
              faults={clashes}
              count={outcome?.faultCount ?? clashes.length}
              texts={textsOf(checked, clashes)}
              edits={work.edits}
              onEdit={work.edit}
            />
          )}
          {checked && checked.faults.length > 0 && !outcome?.written && (
            <FaultsSheet
              key="file"
              by="file"
              faults={checked.faults}
              count={checked.faults.length}
              texts={checked.texts}
              edits={work.edits}
              onEdit={work.edit}
            />
          )}
          {facts && match && !outcome?.written && (
            <ColumnsSheet facts={facts} match={match} onMatch={work.setColumn} />
          )}
          <FileSheet
            hint={
              <>
                {importAsBuilt.oneRowASlot}
                <a className="text-petrol hover:underline" href={paths.api.asBuiltCsv(site)}>
                  {importAsBuilt.takeTheAsBuilt}
                </a>
                {importAsBuilt.asAPatternIt}
              </>
            }
            name={work.name}
            facts={facts}
            fault={work.fileFault}
            onFile={work.takeFile}
            onPaste={work.takeText}
            onSplit={work.split}
          />
        </div>
      </div>
    </>
  );
}

/** What stands in cells that only the server could find fault with. */
function textsOf(
  checked: NonNullable<ReturnType<typeof useImport>['checked']>,
  faults: ReturnType<typeof faultsOf>,
): Record<string, string> {
  const { columns, lines, rows } = checked.table;
  const rowOf = new Map(lines.map((line, i) => [line, i]));
  return Object.fromEntries(
    faults.map((f) => [
      `${f.row}:${f.column}`,
      rows[rowOf.get(f.row) ?? -1]?.[columns.indexOf(f.column)] ?? '',
    ]),
  );
}
