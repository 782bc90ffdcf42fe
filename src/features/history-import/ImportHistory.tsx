import { FileSheet } from '../../components/table-file/FileSheet';
import { ProgressLine } from '../../components/table-file/ProgressLine';
import { ButtonLink } from '../../components/ui/Button';
import { Heading } from '../../components/ui/Heading';
import { Notice } from '../../components/ui/Notice';
import type { HistoryPage } from '../../schemas/api/history-import';
import { paths } from '../../schemas/paths';
import { BadCellsSheet } from './BadCellsSheet';
import { ImportsSheet } from './ImportsSheet';
import { LayoutSheet } from './LayoutSheet';
import { PreviewSheet } from './PreviewSheet';
import { useHistoryImport } from './use-history-import';
import { finding } from './words';
import { importHistory } from '../../words/history-import';

/** Readings of the time before Wakeline: read, looked at, kept, and taken back where they are not right. */
export function ImportHistory({ initial }: { initial: HistoryPage }) {
  const work = useHistoryImport(initial);
  const { facts, layout, checked, made, error, busy } = work;
  const { id, name, timeZone } = initial.site;
  const said = finding({
    imports: work.imports,
    rows: facts?.rows ?? null,
    layoutFault: work.wrong,
    checked,
    made,
    timeZone,
  });
  return (
    <>
      <Heading
        crumbs={[
          { label: importHistory.fleet, href: paths.fleet() },
          { label: name, href: paths.site(id) },
          { label: importHistory.earlierReadings },
        ]}
        finding={said.heading}
        sentence={said.sentence}
      />
      <p className="sr-only" role="status">
        {said.heading}
      </p>
      <div className="grid grid-cols-1 gap-6">
        {busy && (
          <ProgressLine
            words={busy.words}
            share={busy.share}
            onStop={busy.stop ?? undefined}
            stopWords={importHistory.stop}
          />
        )}
        {error && (
          <Notice kind="failed" title={error.title}>
            {error.message}
            {error.fields.length > 0 && (
              <ul className="mt-1">
                {error.fields.slice(0, 5).map((f) => (
                  <li key={f.field}>{f.message}</li>
                ))}
              </ul>
            )}
          </Notice>
        )}
        {made && (
          <Notice
            kind="done"
            title={importHistory.allKept}
            action={<ButtonLink href={paths.site(id)}>{importHistory.lookAtTheSite}</ButtonLink>}
          >
            {importHistory.whereItShows}
          </Notice>
        )}
        {/* while a file is being sent nothing may change what is sent */}
        <div className="grid grid-cols-1 gap-6" inert={busy?.stop ? true : undefined}>
          {checked && !made && checked.readings > 0 && (
            <PreviewSheet checked={checked} timeZone={timeZone} busy={busy !== null} onImport={work.apply} />
          )}
          {checked && facts && !made && checked.leftOut > 0 && (
            <BadCellsSheet checked={checked} headers={facts.headers} />
          )}
          {facts && layout && !made && (
            <LayoutSheet
              facts={facts}
              layout={layout}
              known={initial.known}
              siteZone={timeZone}
              timeZones={initial.timeZones}
              wrong={work.wrong}
              onLayout={work.setLayout}
            />
          )}
          <FileSheet
            hint={<>{importHistory.oneRowATime}</>}
            name={work.name}
            facts={facts}
            fault={work.fileFault}
            onFile={work.takeFile}
            onPaste={work.takeText}
            onSplit={work.split}
          />
          <ImportsSheet
            site={initial.site.id}
            imports={work.imports}
            now={initial.at}
            timeZone={timeZone}
            onUndo={work.undo}
          />
        </div>
      </div>
    </>
  );
}
