import { partInWords } from '../../components/causes/words';
import type { ShutdownRow } from './groups';
import { shutdownColumns } from '../../words/shutdown';

/** The Shutdown page as a download: one row a unit, its cause beside it. */
export const SHUTDOWN_COLUMNS: { header: string; value: (row: ShutdownRow) => string | number | null }[] = [
  { header: shutdownColumns.verdict, value: ({ cause }) => cause.verdict.replaceAll('_', ' ') },
  { header: shutdownColumns.site, value: ({ cause }) => cause.siteName },
  { header: shutdownColumns.string, value: ({ unit }) => unit?.stringName ?? null },
  { header: shutdownColumns.position, value: ({ unit }) => unit?.position ?? null },
  { header: shutdownColumns.serial, value: ({ unit }) => unit?.serial ?? null },
  { header: shutdownColumns.sinceUtc, value: ({ cause, unit }) => unit?.since ?? cause.since },
  {
    header: shutdownColumns.sharedPart,
    value: ({ cause }) => (cause.sharedPart ? partInWords(cause.sharedPart) : null),
  },
  { header: shutdownColumns.cause, value: ({ cause }) => cause.headline },
  { header: shutdownColumns.evidence, value: ({ cause }) => cause.evidence },
  { header: shutdownColumns.couldAlsoBe, value: ({ cause }) => cause.alternatives.join('; ') },
  { header: shutdownColumns.confidence, value: ({ cause }) => Math.round(cause.confidence * 100) },
  {
    header: shutdownColumns.lossWhDay,
    value: ({ cause }) => (cause.lossWhPerDay === null ? null : Math.round(cause.lossWhPerDay)),
  },
];
