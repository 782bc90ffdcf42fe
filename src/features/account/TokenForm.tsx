import { useId, useState } from 'react';
import { Button } from '../../components/ui/Button';
import { Choice } from '../../components/ui/Choice';
import { Field } from '../../components/ui/Field';
import { SCOPE_WORDS, TOKEN_DAYS, TOKEN_SCOPES, type TokenScope } from '../../domain/access/scopes';
import { paths } from '../../schemas/paths';
import type { MadeToken, TokensPage } from '../../schemas/api/tokens';
import { CredentialForm } from './CredentialForms';
import { useSending } from './send';
import { tokenForm } from '../../words/account';

interface Typed {
  name: string;
  scopes: TokenScope[];
  sites: string[];
  days: number;
  current: string;
}
const FIELDS = ['name', 'scopes', 'sites', 'days', 'current'];
const BEFORE: Typed = { name: '', scopes: ['sites:read'], sites: [], days: 90, current: '' };

const toggled = <T,>(list: readonly T[], value: T, on: boolean): T[] =>
  on ? [...list, value] : list.filter((v) => v !== value);

/** What a new token is for, what it may, which sites it sees, and for how long. */
export function TokenForm({
  sites,
  onMade,
}: {
  sites: TokensPage['sites'];
  onMade: (made: MadeToken) => void;
}) {
  const [typed, setTyped] = useState(BEFORE);
  const { busy, fault, send } = useSending<MadeToken>();
  const change = (some: Partial<Typed>) => setTyped({ ...typed, ...some });
  const faultOf = (field: string) => fault?.fault(field) ?? null;
  const make = async () => {
    const reply = await send(paths.api.accountTokens(), { method: 'POST', body: typed });
    if (reply.taken) onMade(reply.answer);
  };
  return (
    <CredentialForm
      fault={fault}
      fields={FIELDS}
      onSend={make}
      action={
        <Button type="submit" weight="primary" disabled={busy}>
          {tokenForm.makeTheToken}
        </Button>
      }
    >
      <Field
        label={tokenForm.name}
        hint={tokenForm.whatWillUseIt}
        value={typed.name}
        autoComplete="off"
        maxLength={80}
        error={faultOf('name')}
        onChange={(event) => change({ name: event.target.value })}
      />
      <Checks
        legend={tokenForm.whatItMayDo}
        options={TOKEN_SCOPES.map((scope) => ({ value: scope, label: SCOPE_WORDS[scope] }))}
        chosen={typed.scopes}
        error={faultOf('scopes')}
        onChange={(scope, on) => change({ scopes: toggled(typed.scopes, scope, on) })}
      />
      <details className="border-b border-t border-rule">
        <summary className="flex min-h-[44px] cursor-pointer items-center justify-between gap-3">
          <span className="font-medium">{tokenForm.sites}</span>
          <span className="text-sm text-ink-2">
            {typed.sites.length === 0 ? tokenForm.everySite : tokenForm.sitesCount(typed.sites.length)}
          </span>
        </summary>
        <Checks
          legend={tokenForm.onlyTheseSites}
          options={sites.map((s) => ({ value: s.id, label: s.name }))}
          chosen={typed.sites}
          error={faultOf('sites')}
          onChange={(site, on) => change({ sites: toggled(typed.sites, site, on) })}
          scroll
        />
      </details>
      <Choice
        label={tokenForm.holdsFor}
        options={TOKEN_DAYS.map((days) => ({ value: String(days), label: tokenForm.days(days) }))}
        value={String(typed.days)}
        error={faultOf('days')}
        onChange={(days) => change({ days: Number(days) })}
      />
      <Field
        label={tokenForm.yourPassword}
        type="password"
        autoComplete="current-password"
        value={typed.current}
        error={faultOf('current')}
        onChange={(event) => change({ current: event.target.value })}
      />
    </CredentialForm>
  );
}

function Checks<T extends string>({
  legend,
  options,
  chosen,
  error,
  onChange,
  scroll = false,
}: {
  legend: string;
  options: readonly { value: T; label: string }[];
  chosen: readonly T[];
  error: string | null;
  onChange: (value: T, on: boolean) => void;
  scroll?: boolean;
}) {
  const id = useId();
  return (
    <fieldset aria-describedby={error ? id : undefined}>
      <legend className="mb-1 font-medium">{legend}</legend>
      <div className={scroll ? 'mb-3 max-h-[240px] overflow-y-auto border border-rule px-3 py-1' : ''}>
        {options.map((option) => (
          <label key={option.value} className="target flex items-center gap-2.5 py-1">
            <input
              type="checkbox"
              checked={chosen.includes(option.value)}
              onChange={(event) => onChange(option.value, event.target.checked)}
              className="h-5 w-5 shrink-0 accent-[var(--petrol)]"
            />
            {option.label}
          </label>
        ))}
      </div>
      {error && (
        <p id={id} role="alert" className="mt-1 text-sm font-medium text-rust-ink">
          {error}
        </p>
      )}
    </fieldset>
  );
}
