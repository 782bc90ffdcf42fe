import { useState } from 'react';
import { Button } from '../../components/ui/Button';
import { Field } from '../../components/ui/Field';
import { Notice } from '../../components/ui/Notice';
import { Sheet } from '../../components/ui/Sheet';
import { SiteTime } from '../../components/ui/Time';
import { paths } from '../../schemas/paths';
import type { AccountPage, SecondFactorBegun } from '../../schemas/api/my-account';
import { useSending } from './send';
import { secondFactorWords } from '../../words/account';

type Stage =
  | { kind: 'rest' }
  | { kind: 'begin' }
  | { kind: 'confirm'; begun: SecondFactorBegun }
  | { kind: 'codes'; codes: string[] }
  | { kind: 'end' };

/** The second thing at sign-in: a code of an authenticator on the phone. */
export function SecondFactor({ page, onChanged }: { page: AccountPage; onChanged: () => void }) {
  const [stage, setStage] = useState<Stage>({ kind: 'rest' });
  const { since, recoveryCodesLeft } = page.secondFactor;
  const rest = () => {
    setStage({ kind: 'rest' });
    onChanged();
  };
  return (
    <Sheet id="second-factor" title={secondFactorWords.secondFactor}>
      {stage.kind === 'rest' && (
        <>
          <p>
            {since ? (
              <>
                {secondFactorWords.inForceSince}
                <SiteTime at={since} now={page.at} timeZone={page.person.timeZone} />
                {secondFactorWords.recoveryCodesLeft(recoveryCodesLeft)}
              </>
            ) : (
              secondFactorWords.none
            )}
          </p>
          <Button className="mt-3" onClick={() => setStage({ kind: since ? 'end' : 'begin' })}>
            {since ? secondFactorWords.endIt : secondFactorWords.setOneUp}
          </Button>
        </>
      )}
      {(stage.kind === 'begin' || stage.kind === 'end') && (
        <WithPassword
          ending={stage.kind === 'end'}
          onBegun={(begun) => setStage({ kind: 'confirm', begun })}
          onEnded={rest}
          onCancel={() => setStage({ kind: 'rest' })}
        />
      )}
      {stage.kind === 'confirm' && (
        <Confirm
          begun={stage.begun}
          onDone={(codes) => setStage({ kind: 'codes', codes })}
          onCancel={() => setStage({ kind: 'rest' })}
        />
      )}
      {stage.kind === 'codes' && (
        <>
          <Notice kind="done" title={secondFactorWords.nowInForce}>
            {secondFactorWords.keepRecoveryCodes}
          </Notice>
          <ul
            className="mt-3 grid grid-cols-2 gap-x-6 gap-y-1 font-mono text-[15px]"
            aria-label={secondFactorWords.recoveryCodes}
          >
            {stage.codes.map((code) => (
              <li key={code}>{code}</li>
            ))}
          </ul>
          <Button className="mt-3" weight="primary" onClick={rest}>
            {secondFactorWords.iHaveKeptThem}
          </Button>
        </>
      )}
    </Sheet>
  );
}

function WithPassword({
  ending,
  onBegun,
  onEnded,
  onCancel,
}: {
  ending: boolean;
  onBegun: (begun: SecondFactorBegun) => void;
  onEnded: () => void;
  onCancel: () => void;
}) {
  const [current, setCurrent] = useState('');
  const { busy, fault, send } = useSending<SecondFactorBegun | undefined>();
  const go = async () => {
    const reply = await send(paths.api.accountSecondFactor(), {
      method: ending ? 'DELETE' : 'POST',
      body: { current },
    });
    if (!reply.taken) return;
    if (ending || !reply.answer) onEnded();
    else onBegun(reply.answer);
  };
  return (
    <form
      noValidate
      onSubmit={(event) => {
        event.preventDefault();
        void go();
      }}
    >
      <Field
        label={secondFactorWords.yourPassword}
        type="password"
        autoComplete="current-password"
        autoFocus
        value={current}
        error={fault ? (fault.fault('current') ?? fault.message) : null}
        onChange={(event) => setCurrent(event.target.value)}
      />
      <div className="mt-3 flex gap-2">
        <Button type="submit" weight="primary" disabled={busy}>
          {ending ? secondFactorWords.endTheSecondFactor : secondFactorWords.goOn}
        </Button>
        <Button onClick={onCancel}>{secondFactorWords.leaveIt}</Button>
      </div>
    </form>
  );
}

function Confirm({
  begun,
  onDone,
  onCancel,
}: {
  begun: SecondFactorBegun;
  onDone: (codes: string[]) => void;
  onCancel: () => void;
}) {
  const [code, setCode] = useState('');
  const { busy, fault, send } = useSending<{ recoveryCodes: string[] }>();
  const go = async () => {
    const reply = await send(paths.api.accountSecondFactor(), { method: 'PUT', body: { code } });
    if (reply.taken) onDone(reply.answer.recoveryCodes);
  };
  return (
    <form
      noValidate
      onSubmit={(event) => {
        event.preventDefault();
        void go();
      }}
    >
      <p>{secondFactorWords.readPicture}</p>
      <img
        alt={secondFactorWords.pictureLabel}
        src={`data:image/svg+xml,${encodeURIComponent(begun.picture)}`}
        className="my-3 h-[180px] w-[180px] bg-[#fff]"
      />
      <p className="mb-3 break-all text-sm text-ink-2">
        {secondFactorWords.orTypeSecret}
        <span className="font-mono">{begun.secret}</span>
      </p>
      <Field
        label={secondFactorWords.code}
        inputMode="numeric"
        autoComplete="one-time-code"
        maxLength={10}
        value={code}
        error={fault ? (fault.fault('code') ?? fault.message) : null}
        onChange={(event) => setCode(event.target.value)}
      />
      <div className="mt-3 flex gap-2">
        <Button type="submit" weight="primary" disabled={busy}>
          {secondFactorWords.putItInForce}
        </Button>
        <Button onClick={onCancel}>{secondFactorWords.leaveIt}</Button>
      </div>
    </form>
  );
}
