import { paths } from '../../schemas/paths';
import { listCases, listNotes, pinNote, readCase } from './cases';
import { listEvents, listRollCalls, listShutdownTests, readShutdownTest } from './history';
import type { Operation } from './operation';
import { listLoggers, listPlacements, listSites, listStrings, readMe, readSite, readString } from './plant';
import { streamDays, streamFrames, streamQuarters } from './telemetry';
import { listCauses, listUnits, listVerdicts } from './units';
import { acknowledgeHazard, openCaseFile, recordMeterReading } from './writes';

/** Everything that /api/v1 takes by token. What is in here is routed, documented and tested. */
export const OPERATIONS: readonly Operation[] = [
  readMe,
  listSites,
  readSite,
  listStrings,
  readString,
  listUnits,
  listPlacements,
  listVerdicts,
  listCauses,
  listEvents,
  listRollCalls,
  listShutdownTests,
  readShutdownTest,
  listCases,
  readCase,
  listNotes,
  listLoggers,
  streamFrames,
  streamQuarters,
  streamDays,
  acknowledgeHazard,
  recordMeterReading,
  openCaseFile,
  pinNote,
];

const ROOT = paths.api.v1('');
const NAME = /^\{(\w+)\}$/;

interface Matched {
  operations: readonly Operation[];
  params: Record<string, string>;
}
const segmentsOf = (path: string): string[] => path.split('/').filter(Boolean);

function paramsOf(pattern: string, segments: readonly string[]): Record<string, string> | null {
  const wanted = segmentsOf(pattern);
  if (wanted.length !== segments.length) return null;
  const params: Record<string, string> = {};
  for (const [i, want] of wanted.entries()) {
    const got = segments[i] ?? '';
    const name = NAME.exec(want)?.[1];
    if (name) params[name] = got;
    else if (want !== got) return null;
  }
  return params;
}

/** What an address of /api/v1 can be asked for; undefined: nothing is there. */
export function operationsAt(pathname: string): Matched | undefined {
  const segments = segmentsOf(pathname.slice(ROOT.length));
  for (const operation of OPERATIONS) {
    const params = paramsOf(operation.path, segments);
    if (params) return { operations: OPERATIONS.filter((o) => o.path === operation.path), params };
  }
  return undefined;
}
