import { useState, type FormEvent } from 'react';
import { useMutation } from '@tanstack/react-query';
import { Button } from '../../components/ui/Button';
import { Field } from '../../components/ui/Field';
import { Notice } from '../../components/ui/Notice';
import { Segmented } from '../../components/ui/Segmented';
import { Sheet } from '../../components/ui/Sheet';
import { nextRound, openRound } from '../../domain/commissioning/shutdown-test-record';
import { ApiError, api } from '../../lib/api';
import { queryClient } from '../../lib/query-client';
import { paths } from '../../schemas/paths';
import type { SignTest } from '../../schemas/api/shutdown-test';
import { HazardCard, Results } from './Results';
import type { TestInHand } from './use-test';
import { signStep } from '../../words/shutdown-test';

interface Props {
  test: TestInHand;
  person: string;
  mayWrite: boolean;
  onAnotherRound: () => void;
}

/** Step 6: what was shown, what is missing, and the signature. */
export function SignStep({ test, person, mayWrite, onAnotherRound }: Props) {
  const { page, record, act } = test;
  const { verdict, site } = page;
  const [remark, setRemark] = useState('');
  const read = record.rounds.some((r) => r.readings.some((x) => x.struck === null));
  const open = openRound(record);
  const next = nextRound(record);
  return (
    <div className="grid gap-5">
      <HazardCard verdict={verdict} />
      {read && (
        <Sheet id="proof" title={signStep.theInstrumentAfterThe}>
          <p className="mb-2">{signStep.proveItAgainOn}</p>
          {mayWrite ? (
            <Segmented
              look="bold"
              label={signStep.provedAfterTheTest}
              value={record.provedAfter === null ? '' : record.provedAfter ? 'right' : 'wrong'}
              options={[
                { value: 'right', label: signStep.itReadTheKnown },
                { value: 'wrong', label: signStep.itDidNot },
              ]}
              onChange={(v) => act({ kind: 'proved_after', proved: v === 'right' })}
            />
          ) : (
            <p>
              {record.provedAfter === null
                ? signStep.notDoneYet
                : record.provedAfter
                  ? signStep.itReadRight
                  : signStep.itDidNotRead}
            </p>
          )}
        </Sheet>
      )}
      <Results verdict={verdict} siteId={site.id} timeZone={site.timeZone} />
      {mayWrite && open === undefined && verdict.missing.length > 0 && (
        <div>
          <Button onClick={onAnotherRound}>{signStep.anotherRoundByThe}</Button>
        </div>
      )}
      <Sheet id="remarks" title={signStep.remarks}>
        {record.remarks.map((r) => (
          <p key={r.at} className="mb-1">
            {r.text} <span className="text-sm text-ink-2">{r.by}</span>
          </p>
        ))}
        {mayWrite && (
          <form
            className="mt-2 flex flex-wrap items-end gap-2"
            onSubmit={(event) => {
              event.preventDefault();
              if (remark.trim() === '') return;
              act({ kind: 'remark', text: remark.trim() });
              setRemark('');
            }}
          >
            <Field
              label={signStep.addARemark}
              className="min-w-[220px] flex-1"
              maxLength={1000}
              value={remark}
              onChange={(e) => setRemark(e.target.value)}
            />
            <Button type="submit">{signStep.addIt}</Button>
          </form>
        )}
      </Sheet>
      {mayWrite && (
        <Sheet id="sign" title={signStep.sign}>
          {open !== undefined ? (
            <p>{signStep.roundIsStillUnder(open)}</p>
          ) : (
            <SignForm
              test={test}
              person={person}
              openRounds={next !== undefined}
              unproved={read && record.provedAfter === null}
            />
          )}
        </Sheet>
      )}
    </div>
  );
}

function SignForm({
  test,
  person,
  openRounds,
  unproved,
}: {
  test: TestInHand;
  person: string;
  openRounds: boolean;
  unproved: boolean;
}) {
  const { page } = test;
  const [password, setPassword] = useState('');
  const sign = useMutation(
    {
      mutationFn: (body: SignTest) =>
        api<{ fingerprint: string }>(paths.api.shutdownTestSign(page.id), { method: 'POST', body }),
      onSuccess: () => window.location.reload(),
      onError: (e) => {
        if (e instanceof ApiError && e.status === 409) void test.reload();
      },
    },
    queryClient(),
  );
  const submit = (event: FormEvent) => {
    event.preventDefault();
    sign.mutate({ password, fingerprint: page.fingerprint });
  };
  const fault = sign.error instanceof ApiError ? sign.error.fault('password') : undefined;
  return (
    <form onSubmit={submit} noValidate>
      <p className="mb-3">
        {signStep.youSignAs}
        <strong className="font-semibold">{person}</strong>:{' '}
        <strong className="font-semibold">{page.verdict.headline}</strong>
        {signStep.aSignedTestIs}
        {openRounds && signStep.notEveryPlannedRound}
      </p>
      {sign.error && !fault && (
        <div className="mb-3">
          <Notice
            kind="failed"
            title={sign.error instanceof ApiError ? sign.error.title : signStep.itWasNotSigned}
          >
            {sign.error.message}
          </Notice>
        </div>
      )}
      <Field
        label={signStep.yourPasswordAgain}
        type="password"
        name="password"
        autoComplete="current-password"
        className="max-w-[360px]"
        value={password}
        error={fault}
        onChange={(e) => setPassword(e.target.value)}
      />
      {test.waiting > 0 && <p className="mt-2 text-rust-ink">{signStep.entriesWaitOnThis(test.waiting)}</p>}
      {unproved && <p className="mt-2 text-rust-ink">{signStep.sayFirstWhetherThe}</p>}
      <Button
        type="submit"
        weight="primary"
        className="mt-3 w-full sm:w-auto"
        disabled={sign.isPending || password === '' || unproved || test.waiting > 0}
      >
        {sign.isPending ? signStep.signing : signStep.signThisTest}
      </Button>
      <p className="mt-3 break-all text-sm text-ink-2">{signStep.fingerprintOfWhatIs(page.fingerprint)}</p>
    </form>
  );
}
