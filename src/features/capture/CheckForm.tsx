import { useEffect, useState } from 'react';
import type { CheckContext, CheckResult, StringCheck } from '../../domain/commissioning/checks/definition';
import { judgeCheck } from '../../domain/commissioning/checks/judge';
import { READING_CAUTION } from '../../domain/readings/words';
import { cautionParts } from '../../components/readings/words';
import { Button } from '../../components/ui/Button';
import { Caution } from '../../components/ui/Caution';
import { Notice } from '../../components/ui/Notice';
import { corrected, type Waiting } from '../../lib/capture-queue';
import { newRef, type ShownCheck } from '../../lib/capture-records';
import type { CheckRecord } from '../../schemas/api/checks';
import { FigureField } from './FigureField';
import { PhotoButton, WaitingPhotos } from './Photos';
import { checkLabel, checkRecord, RESULT_WORDS } from './records';
import {
  EMPTY_DRAFT,
  draftOf,
  keepDraft,
  keptDraft,
  mergedDraft,
  readDraft,
  type CheckDraft,
} from './check-draft';
import { keepPhotos } from './save';
import type { ScreenProps } from './screen';
import { checkForm } from '../../words/capture';

interface Props extends ScreenProps {
  check: StringCheck;
  record: ShownCheck | null;
  context: CheckContext;
  /** After it is kept: the check that comes next, or the list of what waits. */
  onSaved: () => void;
}

const RESULTS: { result: CheckResult; label: string }[] = [
  { result: 'pass', label: checkForm.pass },
  { result: 'fail', label: checkForm.fail },
  { result: 'not_applicable', label: checkForm.notApplicable },
];

/** What the form begins with: what was typed in this tab, what is put right, or what is recorded. */
function beginning(props: Props, fixed: Waiting | null): CheckDraft {
  const { site, string, check, record } = props;
  const typed = keptDraft(site.person.id, string.id, check.key);
  if (typed) return typed;
  if (fixed) {
    const mine = fixed.body as unknown as CheckRecord;
    return fixed.state === 'conflict' ? mergedDraft(mine, fixed.current as CheckRecord) : draftOf(mine);
  }
  return record ? draftOf(record) : EMPTY_DRAFT;
}

/** One check: how it is done, its figures, what they say, photos, and the result with one tap. */
export function CheckForm(props: Props) {
  const { phone, state, site, string, view, change, say, check, record, context, onSaved } = props;
  const fixed = state.records.find((r) => r.ref === view.fix && r.kind === 'check') ?? null;
  const [draft, setDraft] = useState(() => beginning(props, fixed));
  const [pad, setPad] = useState<string | null>(null);
  const [faults, setFaults] = useState<Record<string, string>>({});
  const [failure, setFailure] = useState('');
  const { id: person } = site.person;
  useEffect(() => {
    keepDraft(person, string.id, check.key, draft);
  }, [draft, person, string.id, check.key]);

  const knows = (connector: string): boolean => site.connectors.some((c) => c.id === connector);
  const edit = (some: Partial<CheckDraft>) => {
    setFaults({});
    setDraft({ ...draft, ...some });
  };
  const asPass = readDraft(check.key, check.figures, 'pass', draft, knows);
  const told =
    asPass.facts && Object.keys(asPass.facts.figures).length > 0
      ? judgeCheck({ ...asPass.facts, atS: Date.parse(site.at) / 1000 }, context)
      : null;

  const save = async (result: CheckResult, reason = draft.reason) => {
    const read = readDraft(check.key, check.figures, result, { ...draft, reason }, knows);
    if (!read.facts) {
      setFaults(read.faults);
      setFailure(Object.values(read.faults)[0] ?? '');
      return;
    }
    const made = { snapshot: site, string, ref: view.draft || newRef(), at: new Date().toISOString() };
    try {
      if (fixed) {
        const current = fixed.state === 'conflict' ? (fixed.current as CheckRecord).ref : null;
        const before = fixed.body as unknown as CheckRecord;
        const body = {
          ...checkRecord({ ...made, ref: fixed.ref }, read.facts, current ?? before.supersedes).body,
        };
        await phone?.change([corrected(fixed, body, checkLabel(string.name, read.facts))]);
      } else await phone?.add([checkRecord(made, read.facts, record?.ref ?? null)]);
      keepDraft(person, string.id, check.key, null);
      say(checkForm.keptWhich(checkLabel(string.name, read.facts)));
      onSaved();
    } catch (error) {
      setFailure(error instanceof Error ? error.message : checkForm.itCouldNotBe);
    }
  };
  const photograph = async (files: File[]) => {
    const subjectRef = view.draft || newRef();
    if (!view.draft) change({ draft: subjectRef }, 'typed');
    try {
      const taken = { phone: phone!, snapshot: site, string, subject: 'install_check' as const, subjectRef };
      setFailure((phone && (await keepPhotos(files, { ...taken, of: check.name }))) ?? '');
    } catch (error) {
      setFailure(error instanceof Error ? error.message : checkForm.thePhotoCouldNot);
    }
  };
  const about = new Set([view.draft, record?.ref].filter(Boolean));
  const photos = state.records.filter((r) => r.kind === 'photo' && about.has(String(r.body.subjectRef)));
  const caution = cautionParts(READING_CAUTION);

  return (
    <div className="space-y-4 pb-3">
      <p className="text-[15px] leading-[21px]">{check.how}</p>
      {check.phase !== 'mounting' && <Caution strong={caution.strong}>{caution.rest}</Caution>}
      {check.warning && (
        <p className="border border-dashed border-rust bg-rust-wash p-3 text-[15px] text-rust-ink">
          {check.warning}
        </p>
      )}
      {record && (
        <p className="text-sm text-ink-2">
          {checkForm.recordedNewRecordTakes(
            RESULT_WORDS[record.result],
            record.at,
            site.at,
            site.site.timeZone,
            record.person,
          )}
        </p>
      )}
      {check.figures.map((figure) => (
        <FigureField
          key={figure.key}
          figure={figure}
          value={draft.figures[figure.key] ?? ''}
          fault={faults[figure.key]}
          connectors={site.connectors}
          pad={pad === figure.key}
          openPad={(open) => setPad(open ? figure.key : null)}
          onChange={(value) => edit({ figures: { ...draft.figures, [figure.key]: value } })}
        />
      ))}
      {told && told.words.length > 0 && (
        <Notice kind={told.weight === 'blocks' ? 'failed' : 'stale'} title={told.words.join(' ')}>
          {told.remedy} <span className="text-sm">({told.source})</span>
        </Notice>
      )}
      <Area
        label={checkForm.reasonForFailAnd}
        value={draft.reason}
        fault={faults.reason}
        onChange={(reason) => edit({ reason })}
      />
      <Area
        label={checkForm.note}
        value={draft.note}
        fault={faults.note}
        onChange={(note) => edit({ note })}
      />
      <WaitingPhotos phone={phone} photos={photos} progress={state.progress} />
      {failure && (
        <p role="alert" className="font-medium text-rust-ink">
          {failure}
        </p>
      )}
      <div className="grid grid-cols-2 gap-2">
        {RESULTS.map(({ result, label }) => (
          <Button
            key={result}
            weight={result === 'pass' ? 'primary' : 'plain'}
            className="min-h-[52px]"
            disabled={!phone}
            aria-label={`${label}: ${check.name}`}
            onClick={() => void save(result)}
          >
            {label}
          </Button>
        ))}
        <PhotoButton label={checkForm.photo} onTaken={(files) => void photograph(files)} />
      </div>
      {check.offersNotApplicable && (
        <Button
          className="min-h-[48px] w-full"
          onClick={() => void save('not_applicable', check.offersNotApplicable ?? '')}
        >
          {checkForm.notApplicable2(check.offersNotApplicable)}
        </Button>
      )}
      <p className="text-xs text-ink-2">{checkForm.source(check.source)}</p>
    </div>
  );
}

function Area({
  label,
  value,
  fault,
  onChange,
}: {
  label: string;
  value: string;
  fault?: string;
  onChange: (value: string) => void;
}) {
  return (
    <label className="block">
      <span className="mb-1 block font-medium">{label}</span>
      <textarea
        rows={2}
        value={value}
        aria-invalid={fault ? true : undefined}
        onChange={(event) => onChange(event.target.value)}
        className={`w-full rounded border bg-sheet px-3 py-2 text-[16px] leading-[22px] text-ink ${fault ? 'border-rust' : 'border-rule'}`}
      />
      {fault && (
        <span role="alert" className="mt-1 block text-sm font-medium text-rust-ink">
          {fault}
        </span>
      )}
    </label>
  );
}
