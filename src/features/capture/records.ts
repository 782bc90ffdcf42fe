import { checkDefinition } from '../../domain/commissioning/checks/list';
import type { ReadingKind, ReadingStage } from '../../domain/commissioning/readings/stages';
import { KIND_WORDS } from '../../words/domain-reading-stages';
import { volts } from '../../drawings/numbers';
import type { CaptureSnapshot, CaptureString } from '../../schemas/api/capture';
import type { CheckInput } from '../../schemas/api/checks';
import type { ReadingInput } from '../../schemas/api/readings';
import type { KeptPhoto, NewRecord } from '../../lib/capture-store';
import { captureRecords } from '../../words/capture';

/** Records as they are made on the phone. */

interface Made {
  snapshot: CaptureSnapshot;
  string: CaptureString;
  ref: string;
  /** ISO 8601, the phone's clock. */
  at: string;
}
const base = ({ snapshot, string, ref, at }: Made): Omit<NewRecord, 'kind' | 'label' | 'body'> => ({
  ref,
  person: snapshot.person.id,
  site: snapshot.site.id,
  string: string.id,
  madeAt: at,
});

export type ReadingFacts = Pick<
  ReadingInput,
  'stage' | 'kind' | 'light' | 'meterMode' | 'commanded' | 'voltage' | 'note'
>;

/** The record that stands for this stage and kind now: a new one supersedes it. */
export const readingNow = (string: CaptureString, stage: ReadingStage, kind: ReadingKind) =>
  string.readings.find((r) => r.stage === stage && r.kind === kind) ?? null;

export const readingLabel = (string: string, kind: ReadingKind, voltage: number): string =>
  `${string}, ${KIND_WORDS[kind]}: ${volts(voltage)}`;

export function readingRecord(made: Made, facts: ReadingFacts, supersedes: string | null): NewRecord {
  const body: ReadingInput = { ref: made.ref, stringId: made.string.id, ...facts, at: made.at, supersedes };
  return {
    ...base(made),
    kind: 'reading',
    label: readingLabel(made.string.name, facts.kind, facts.voltage),
    body,
  };
}

export type CheckFacts = Pick<CheckInput, 'check' | 'result' | 'reason' | 'note' | 'figures'>;
export const RESULT_WORDS = {
  pass: captureRecords.passed,
  fail: captureRecords.failed,
  not_applicable: captureRecords.notApplicable,
} as const;

export const checkLabel = (string: string, facts: Pick<CheckFacts, 'check' | 'result'>): string =>
  `${string}, ${checkDefinition(facts.check).name}: ${RESULT_WORDS[facts.result]}`;

export function checkRecord(made: Made, facts: CheckFacts, supersedes: string | null): NewRecord {
  const body: CheckInput = { ref: made.ref, stringId: made.string.id, ...facts, at: made.at, supersedes };
  return { ...base(made), kind: 'check', label: checkLabel(made.string.name, facts), body };
}

export type PhotoSubject = 'install_check' | 'meter_reading';

/** A photo and what it shows. `subjectRef` may be of a record that is not made yet. */
export function photoRecord(
  made: Made,
  file: { name: string; type: string; bytes: ArrayBuffer },
  subject: PhotoSubject,
  subjectRef: string,
  of: string,
): { record: NewRecord; photo: KeptPhoto } {
  return {
    record: {
      ...base(made),
      kind: 'photo',
      label: captureRecords.whichPhotoOfSaid(made.string.name, of),
      body: {
        ref: made.ref,
        subject,
        subjectRef,
        string: made.string.id,
        name: file.name || 'photo.jpg',
        at: made.at,
      },
    },
    photo: { ref: made.ref, type: file.type, bytes: file.bytes },
  };
}
