import { useCallback, useEffect, useRef, useState } from 'react';
import {
  REQUIRED_COLUMNS,
  type ColumnMatch,
  type ImportColumn,
} from '../../domain/commissioning/import/columns';
import { hasFaults } from '../../domain/commissioning/import/read-import';
import { IMPORT_COLUMNS } from '../../domain/commissioning/import/columns';
import { NO_CHOICES, type CellFault, type ImportChoices } from '../../domain/commissioning/import/table';
import { ApiError } from '../../lib/api';
import type { ImportOutcome, ImportPage } from '../../schemas/api/import';
import { IMPORT_STEPS } from '../../schemas/lists-and-limits';
import type { CheckedFile, FileFacts } from './desk';
import { DeskClient } from '../../components/table-file/desk-client';
import type { DeskAnswer, DeskOrder } from './check.worker';
import type { Separator } from '../../components/table-file/separators';
import { sendImport, type Progress } from './send';
import { STEP_WORDS } from '../../words/import-sentences';
import { importUseImport } from '../../words/import';

export const FILE_MAX_BYTES = 20 * 1024 * 1024;

export interface Busy {
  words: string;
  share: number | null;
  stop: (() => void) | null;
}

/** Faults that the server names as `rows.LINE.COLUMN`, as faults of cells. */
export function faultsOf(error: ApiError): CellFault[] {
  return error.fields.flatMap((f): CellFault[] => {
    const [, line, name] = /^rows\.(\d+)\.(\w+)$/.exec(f.field) ?? [];
    const column = IMPORT_COLUMNS.find((c) => c === name);
    return line && column
      ? [
          {
            row: Number(line),
            column,
            code: 'serial_elsewhere',
            message: f.message.replace(/\.$/, ''),
            remedy: '',
            suggestion: null,
            weight: 'fault',
          },
        ]
      : [];
  });
}

/** One import from the file to what is kept: what is known, what is under way, what the person may do. */
export function useImport(initial: ImportPage) {
  const desk = useRef<DeskClient<DeskOrder, DeskAnswer> | null>(null);
  const [name, setName] = useState<string | null>(null);
  const [facts, setFacts] = useState<FileFacts | null>(null);
  const [fileFault, setFileFault] = useState<string | null>(null);
  const [match, setMatch] = useState<ColumnMatch | null>(null);
  const [choices, setChoices] = useState<ImportChoices>(NO_CHOICES);
  const [edits, setEdits] = useState<Record<string, string>>({});
  const [checked, setChecked] = useState<CheckedFile | null>(null);
  const [outcome, setOutcome] = useState<ImportOutcome | null>(null);
  const [error, setError] = useState<ApiError | null>(null);
  const [busy, setBusy] = useState<Busy | null>(null);
  /** Of the newest check: answers to older ones are dropped. */
  const turn = useRef(0);
  const abort = useRef<AbortController | null>(null);

  useEffect(() => {
    const client = new DeskClient<DeskOrder, DeskAnswer>(
      new Worker(new URL('./check.worker.ts', import.meta.url), { type: 'module' }),
    );
    desk.current = client;
    return () => {
      abort.current?.abort();
      client.close();
    };
  }, []);

  const took = useCallback((read: FileFacts) => {
    setFacts(read);
    setMatch(read.match);
    setChecked(null);
    setOutcome(null);
    setError(null);
  }, []);

  const take = useCallback(
    async (title: string, content: () => Promise<Uint8Array | string>) => {
      setName(title);
      setFileFault(null);
      setFacts(null);
      setMatch(null);
      setChecked(null);
      setOutcome(null);
      setError(null);
      setChoices(NO_CHOICES);
      setEdits({});
      setBusy({ words: importUseImport.readingTheFile, share: null, stop: null });
      try {
        const read = await desk.current?.ask({ kind: 'take', content: await content() }, 'file', (share) =>
          setBusy({ words: importUseImport.readingTheFile, share, stop: null }),
        );
        if (read) took(read.facts);
      } catch (fault) {
        setFileFault(fault instanceof Error ? fault.message : String(fault));
      } finally {
        setBusy(null);
      }
    },
    [took],
  );
  const takeFile = useCallback(
    (file: File) => {
      if (file.size > FILE_MAX_BYTES) {
        setName(file.name);
        setFacts(null);
        setMatch(null);
        setChecked(null);
        setFileFault(importUseImport.itHasMBAnd(Math.round(file.size / 1024 / 1024)));
        return;
      }
      void take(file.name, async () => new Uint8Array(await file.arrayBuffer()));
    },
    [take],
  );
  const takeText = useCallback(
    (text: string) => void take(importUseImport.pastedCells, () => Promise.resolve(text)),
    [take],
  );
  const split = useCallback(
    async (separator: Separator, hasHeader: boolean) => {
      try {
        const order = {
          kind: 'split',
          separator,
          ...(hasHeader === undefined ? {} : { hasHeader }),
        } as const;
        const read = await desk.current?.ask(order, 'file');
        if (read) took(read.facts);
        setFileFault(null);
      } catch (fault) {
        setFileFault(fault instanceof Error ? fault.message : String(fault));
      }
    },
    [took],
  );

  const missing: ImportColumn[] = match ? REQUIRED_COLUMNS.filter((c) => match[c] === null) : [];
  const ready = facts !== null && match !== null && missing.length === 0 && facts.faults.length === 0;

  /** The browser's check, then, if nothing is wrong, the server's. Runs whenever something has changed. */
  const check = useCallback(async () => {
    if (!desk.current || !match || !facts) return;
    const mine = ++turn.current;
    abort.current?.abort();
    const words = importUseImport.checkingTheCells;
    setBusy({ words, share: null, stop: null });
    setOutcome(null);
    setError(null);
    try {
      const order = { match, hasHeader: facts.hasHeader, choices, edits };
      const answer = await desk.current.ask(
        { kind: 'check', order, names: initial.names },
        'checked',
        (share) => mine === turn.current && setBusy({ words, share, stop: null }),
      );
      const found = answer.checked;
      if (mine !== turn.current) return;
      setChecked(found);
      if (hasFaults(found.faults)) return;
      const control = new AbortController();
      abort.current = control;
      setBusy({ words: STEP_WORDS.comparing, share: null, stop: null });
      const compared = await sendImport(
        initial.site.id,
        { mode: 'check', table: copyOf(found), choices: plain(choices) },
        () => undefined,
        control.signal,
      );
      if (mine === turn.current) setOutcome(compared);
    } catch (fault) {
      if (mine !== turn.current) return;
      if (fault instanceof ApiError) setError(fault);
      else setFileFault(fault instanceof Error ? fault.message : String(fault));
    } finally {
      if (mine === turn.current) setBusy(null);
    }
  }, [match, facts, choices, edits, initial]);

  useEffect(() => {
    if (!ready) return;
    const timer = setTimeout(() => void check(), 0);
    return () => clearTimeout(timer);
  }, [ready, check]);

  const apply = useCallback(
    async (reason: string) => {
      if (!checked || !outcome) return;
      const control = new AbortController();
      abort.current = control;
      const stop = () => control.abort();
      setError(null);
      setBusy({ words: importUseImport.sendingTheRows, share: null, stop });
      const onProgress = ({ step }: Progress) =>
        setBusy({
          words: STEP_WORDS[step],
          share: (IMPORT_STEPS.indexOf(step) + 1) / (IMPORT_STEPS.length + 1),
          stop,
        });
      try {
        setOutcome(
          await sendImport(
            initial.site.id,
            {
              mode: 'apply',
              table: copyOf(checked),
              choices: plain(choices),
              reason,
              seen: outcome.fingerprint,
            },
            onProgress,
            control.signal,
          ),
        );
      } catch (fault) {
        if (fault instanceof ApiError) setError(fault);
        else setError(new ApiError(0, importUseImport.stopped, importUseImport.theAsBuiltIs));
      } finally {
        setBusy(null);
      }
    },
    [checked, outcome, choices, initial],
  );

  return {
    name,
    facts,
    fileFault,
    match,
    missing,
    choices,
    edits,
    checked,
    outcome,
    error,
    busy,
    takeFile,
    takeText,
    split: (separator: Separator, hasHeader: boolean) => void split(separator, hasHeader),
    setColumn: (column: ImportColumn, index: number | null) =>
      setMatch((m) => {
        if (!m) return m;
        // one column of the file has one meaning
        const freed = IMPORT_COLUMNS.filter((c) => index !== null && m[c] === index);
        return { ...m, ...Object.fromEntries(freed.map((c) => [c, null])), [column]: index };
      }),
    setChoices,
    edit: (some: Record<string, string>) => setEdits((e) => ({ ...e, ...some })),
    check: () => void check(),
    apply: (reason: string) => void apply(reason),
  };
}

const copyOf = ({ table }: CheckedFile) => ({
  columns: [...table.columns],
  lines: [...table.lines],
  rows: table.rows.map((r) => [...r]),
});
const plain = (choices: ImportChoices) => ({
  ...choices,
  newStrings: choices.newStrings && {
    ...choices.newStrings,
    transmitters: [...choices.newStrings.transmitters],
  },
});
