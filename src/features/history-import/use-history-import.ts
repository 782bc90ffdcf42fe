import { useEffect, useRef, useState } from 'react';
import type { Separator } from '../../components/table-file/separators';
import { layoutFault, type Layout } from '../../domain/history-import/layout';
import { ApiError } from '../../lib/api';
import type { HistoryImportView, HistoryPage } from '../../schemas/api/history-import';
import { HISTORY_FILE_MAX_BYTES } from '../../schemas/lists-and-limits';
import type { CheckedHistory, HistoryFacts } from './desk';
import { DeskClient } from '../../components/table-file/desk-client';
import type { DeskAnswer, DeskOrder } from './read.worker';
import { sendHistory, takeBack } from './send';
import { STEP_WORDS } from './words';
import { historyImportUseHistoryImport } from '../../words/history-import';

export interface Busy {
  words: string;
  share: number | null;
  stop: (() => void) | null;
}
const PASTED = historyImportUseHistoryImport.pastedCells;

/** One import from the file to what is kept, and what was imported before. */
export function useHistoryImport(initial: HistoryPage) {
  const desk = useRef<DeskClient<DeskOrder, DeskAnswer> | null>(null);
  const [imports, setImports] = useState(initial.imports);
  const [name, setName] = useState<string | null>(null);
  const [facts, setFacts] = useState<HistoryFacts | null>(null);
  const [fileFault, setFileFault] = useState<string | null>(null);
  const [layout, setLayout] = useState<Layout | null>(null);
  const [checked, setChecked] = useState<CheckedHistory | null>(null);
  const [made, setMade] = useState<HistoryImportView | null>(null);
  const [error, setError] = useState<ApiError | null>(null);
  const [busy, setBusy] = useState<Busy | null>(null);
  /** Of the newest check: answers to older ones are dropped. */
  const turn = useRef(0);
  const abort = useRef<AbortController | null>(null);

  useEffect(() => {
    const client = new DeskClient<DeskOrder, DeskAnswer>(
      new Worker(new URL('./read.worker.ts', import.meta.url), { type: 'module' }),
    );
    desk.current = client;
    return () => {
      abort.current?.abort();
      client.close();
    };
  }, []);

  const failed = (fault: unknown) => setFileFault(fault instanceof Error ? fault.message : String(fault));
  const check = async (wanted: Layout) => {
    const mine = ++turn.current;
    const words = historyImportUseHistoryImport.checkingTheCells;
    setBusy({ words, share: null, stop: null });
    setChecked(null);
    setError(null);
    try {
      const nowS = Math.floor(Date.now() / 1000);
      const answer = await desk.current?.ask({ kind: 'check', layout: wanted, nowS }, 'checked', (share) => {
        if (mine === turn.current) setBusy({ words, share, stop: null });
      });
      if (answer && mine === turn.current) setChecked(answer.checked);
    } catch (fault) {
      if (mine === turn.current) failed(fault);
    } finally {
      if (mine === turn.current) setBusy(null);
    }
  };
  /** Another layout: what was read by the one before is nothing any more. */
  const adopt = (next: Layout) => {
    setLayout(next);
    if (layoutFault(next) === null) void check(next);
    else {
      turn.current++;
      setBusy(null);
      setChecked(null);
    }
  };
  const took = (read: HistoryFacts) => {
    setFacts(read);
    adopt(read.layout);
  };
  const begin = (title: string | null) => {
    turn.current++;
    if (title !== null) setName(title);
    setFileFault(null);
    setFacts(null);
    setLayout(null);
    setChecked(null);
    setMade(null);
    setError(null);
  };

  const take = async (title: string, content: () => Promise<Uint8Array | string>) => {
    begin(title);
    const words = historyImportUseHistoryImport.readingTheFile;
    setBusy({ words, share: null, stop: null });
    try {
      const { known, site } = initial;
      const order = { kind: 'take', content: await content(), known, timeZone: site.timeZone } as const;
      const answer = await desk.current?.ask(order, 'file', (share) => setBusy({ words, share, stop: null }));
      setBusy(null);
      if (answer) took(answer.facts);
    } catch (fault) {
      setBusy(null);
      failed(fault);
    }
  };
  const takeFile = (file: File) => {
    if (file.size > HISTORY_FILE_MAX_BYTES) {
      begin(file.name);
      setFileFault(
        historyImportUseHistoryImport.fileTooLarge(
          Math.round(file.size / 1024 / 1024),
          HISTORY_FILE_MAX_BYTES,
        ),
      );
      return;
    }
    void take(file.name, async () => new Uint8Array(await file.arrayBuffer()));
  };
  const split = async (separator: Separator, hasHeader: boolean) => {
    begin(null);
    try {
      const answer = await desk.current?.ask({ kind: 'split', separator, hasHeader }, 'file');
      if (answer) took(answer.facts);
    } catch (fault) {
      failed(fault);
    }
  };

  const wrong = layout ? layoutFault(layout, facts?.headers) : null;
  const apply = async (note: string) => {
    if (!checked || !layout || !facts) return;
    const control = new AbortController();
    abort.current = control;
    const stop = () => control.abort();
    setError(null);
    setBusy({ words: historyImportUseHistoryImport.sendingTheFile, share: null, stop });
    try {
      const { rows, readings, leftOut } = checked;
      const order = {
        fileName: (name ?? PASTED).slice(-200),
        separator: facts.separator,
        layout,
        note,
        seen: { rows, readings, leftOut },
      };
      const answer = await desk.current?.ask({ kind: 'body', order }, 'body');
      if (!answer) return;
      const outcome = await sendHistory(
        initial.site.id,
        answer.body,
        (step, share) => setBusy({ words: STEP_WORDS[step], share, stop }),
        control.signal,
      );
      setImports((list) => [outcome, ...list]);
      setMade(outcome);
    } catch (fault) {
      setError(
        fault instanceof ApiError
          ? fault
          : new ApiError(
              0,
              historyImportUseHistoryImport.stopped,
              historyImportUseHistoryImport.nothingOfTheFile,
            ),
      );
    } finally {
      setBusy(null);
    }
  };

  return {
    imports,
    name,
    facts,
    fileFault,
    layout,
    wrong,
    checked,
    made,
    error,
    busy,
    takeFile,
    takeText: (text: string) => void take(PASTED, () => Promise.resolve(text)),
    split: (separator: Separator, hasHeader: boolean) => void split(separator, hasHeader),
    setLayout: (next: Layout) => {
      setMade(null);
      adopt(next);
    },
    apply: (note: string) => void apply(note),
    /** @throws ApiError as the server says */
    undo: async (id: string, reason: string) => {
      const undone = await takeBack(initial.site.id, id, reason);
      setImports((list) => list.map((i) => (i.id === id ? undone : i)));
      setMade((m) => (m?.id === id ? null : m));
    },
  };
}
