import { useState, type ReactNode } from 'react';
import { Button } from '../../components/ui/Button';
import { Field } from '../../components/ui/Field';
import { Notice } from '../../components/ui/Notice';
import { PASSWORD_MIN } from '../../domain/access/password';
import { paths } from '../../schemas/paths';
import { useSending } from './send';
import { credentialForms } from '../../words/account';

/** A form about what lets people in: what came of it, what was wrong with the whole where no field carries it, its fields. */
export function CredentialForm({
  fault,
  fields,
  done = null,
  onSend,
  children,
  action,
}: {
  fault: ReturnType<typeof useSending>['fault'];
  fields: readonly string[];
  done?: ReactNode;
  onSend: () => Promise<void>;
  children: ReactNode;
  action: ReactNode;
}) {
  return (
    <form
      className="grid gap-4"
      noValidate
      onSubmit={(event) => {
        event.preventDefault();
        void onSend();
      }}
    >
      {!fault && done}
      {fault && !fields.some((f) => fault.fault(f)) && (
        <p role="alert" className="font-medium text-rust-ink">
          {fault.message}
        </p>
      )}
      {children}
      <div>{action}</div>
    </form>
  );
}

export function PasswordForm({ email, onChanged }: { email: string; onChanged: () => void }) {
  const [current, setCurrent] = useState('');
  const [password, setPassword] = useState('');
  const [done, setDone] = useState(false);
  const { busy, fault, send } = useSending();
  const change = async () => {
    setDone(false);
    const { taken } = await send(paths.api.accountPassword(), { method: 'PUT', body: { current, password } });
    if (!taken) return;
    setCurrent('');
    setPassword('');
    setDone(true);
    onChanged();
  };
  return (
    <CredentialForm
      fault={fault}
      fields={['current', 'password']}
      done={done && <Notice kind="done" title={credentialForms.passwordChanged} />}
      onSend={change}
      action={
        <Button type="submit" weight="primary" disabled={busy}>
          {credentialForms.changeThePassword}
        </Button>
      }
    >
      <input type="hidden" autoComplete="username" value={email} />
      <Field
        label={credentialForms.currentPassword}
        type="password"
        autoComplete="current-password"
        value={current}
        error={fault?.fault('current')}
        onChange={(event) => setCurrent(event.target.value)}
      />
      <Field
        label={credentialForms.newPassword}
        type="password"
        autoComplete="new-password"
        value={password}
        hint={credentialForms.passwordHint(PASSWORD_MIN)}
        error={fault?.fault('password')}
        onChange={(event) => setPassword(event.target.value)}
      />
    </CredentialForm>
  );
}

export function EmailForm({ email }: { email: string }) {
  const [current, setCurrent] = useState('');
  const [wanted, setWanted] = useState('');
  const [sentTo, setSentTo] = useState('');
  const { busy, fault, send } = useSending();
  const ask = async () => {
    setSentTo('');
    const { taken } = await send(paths.api.accountEmail(), {
      method: 'PUT',
      body: { current, email: wanted },
    });
    if (!taken) return;
    setCurrent('');
    setSentTo(wanted);
  };
  return (
    <CredentialForm
      fault={fault}
      fields={['current', 'email']}
      done={
        sentTo && (
          <Notice kind="done" title={credentialForms.letterSent(sentTo)}>
            {credentialForms.addressChangesWhen(email)}
          </Notice>
        )
      }
      onSend={ask}
      action={
        <Button type="submit" disabled={busy}>
          {credentialForms.sendTheLetter}
        </Button>
      }
    >
      <Field
        label={credentialForms.newAddress}
        type="email"
        autoComplete="email"
        value={wanted}
        error={fault?.fault('email')}
        onChange={(event) => setWanted(event.target.value)}
      />
      <Field
        label={credentialForms.currentPassword}
        type="password"
        autoComplete="current-password"
        value={current}
        error={fault?.fault('current')}
        onChange={(event) => setCurrent(event.target.value)}
      />
    </CredentialForm>
  );
}
