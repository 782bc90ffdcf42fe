import { useState } from 'react';
import { Button } from '../../components/ui/Button';
import { Field } from '../../components/ui/Field';
import { Notice } from '../../components/ui/Notice';
import { Sheet } from '../../components/ui/Sheet';
import { SiteTime } from '../../components/ui/Time';
import { counted } from '../../drawings/numbers';
import { paths } from '../../schemas/paths';
import type { AccountPage, SecondFactorBegun } from '../../schemas/api/my-account';
import { useSending } from './send';

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
    <Sheet id="second-factor" title="Second factor">
      {stage.kind === 'rest' && (
        <>
          <p>
            {since ? (
              <>
                In force since <SiteTime at={since} now={page.at} timeZone={page.person.timeZone} />.{' '}
                {counted(recoveryCodesLeft, 'recovery code')} left.
              </>
            ) : (
              'None. With one, sign-in also asks for a code that an authenticator on your phone shows.'
            )}
          </p>
          <Button className="mt-3" onClick={() => setStage({ kind: since ? 'end' : 'begin' })}>
            {since ? 'End it' : 'Set one up'}
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
          <Notice kind="done" title="The second factor is in force">
            Keep these recovery codes where you will find them without your phone. Each works once; they are
            not shown again.
          </Notice>
          <ul
            className="mt-3 grid grid-cols-2 gap-x-6 gap-y-1 font-mono text-[15px]"
            aria-label="Recovery codes"
          >
            {stage.codes.map((code) => (
              <li key={code}>{code}</li>
            ))}
          </ul>
          <Button className="mt-3" weight="primary" onClick={rest}>
            I have kept them
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
        label="Your password"
        type="password"
        autoComplete="current-password"
        autoFocus
        value={current}
        error={fault ? (fault.fault('current') ?? fault.message) : null}
        onChange={(event) => setCurrent(event.target.value)}
      />
      <div className="mt-3 flex gap-2">
        <Button type="submit" weight="primary" disabled={busy}>
          {ending ? 'End the second factor' : 'Go on'}
        </Button>
        <Button onClick={onCancel}>Leave it</Button>
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
      <p>Read this picture with your authenticator, then type the code that it shows.</p>
      <img
        alt="Code for your authenticator; the secret below says the same"
        src={`data:image/svg+xml,${encodeURIComponent(begun.picture)}`}
        className="my-3 h-[180px] w-[180px] bg-[#fff]"
      />
      <p className="mb-3 break-all text-sm text-ink-2">
        Or type in the secret <span className="font-mono">{begun.secret}</span>
      </p>
      <Field
        label="Code"
        inputMode="numeric"
        autoComplete="one-time-code"
        maxLength={10}
        value={code}
        error={fault ? (fault.fault('code') ?? fault.message) : null}
        onChange={(event) => setCode(event.target.value)}
      />
      <div className="mt-3 flex gap-2">
        <Button type="submit" weight="primary" disabled={busy}>
          Put it in force
        </Button>
        <Button onClick={onCancel}>Leave it</Button>
      </div>
    </form>
  );
}
