import { useState } from 'react';
import { Button } from '../../components/ui/Button';
import { Field } from '../../components/ui/Field';
import { ROLES, type Role } from '../../domain/access/permissions';
import type { ApiError } from '../../lib/api';
import type { PeoplePage } from '../../schemas/api/people';
import { personForm } from '../../words/people';

export const ROLE_WORDS: Record<Role, string> = {
  manager: personForm.roleManager,
  technician: personForm.roleTechnician,
  analyst: personForm.roleAnalyst,
  customer: personForm.roleCustomer,
};

export interface PersonDraft {
  name: string;
  email: string;
  role: Role;
  sites: string[];
}

interface Props {
  draft: PersonDraft;
  sites: PeoplePage['sites'];
  /** Addresses are changed by their owners. */
  fixedEmail?: boolean;
  /** Nobody changes their own role. */
  fixedRole?: boolean;
  fault: ApiError | null;
  busy: boolean;
  submit: string;
  onSubmit: (draft: PersonDraft) => void;
}

/** Name, address, role and, for a customer, the sites. */
export function PersonForm({ draft, sites, fixedEmail, fixedRole, fault, busy, submit, onSubmit }: Props) {
  const [typed, setTyped] = useState(draft);
  const change = (some: Partial<PersonDraft>) => setTyped({ ...typed, ...some });
  const faultOf = (field: string) => fault?.fault(field) ?? null;
  const elsewhere = fault && !['name', 'email', 'role', 'sites'].some((f) => fault.fault(f));
  return (
    <form
      className="grid gap-4"
      noValidate
      onSubmit={(event) => {
        event.preventDefault();
        onSubmit(typed);
      }}
    >
      {elsewhere && (
        <p role="alert" className="font-medium text-rust-ink">
          {fault.message}
        </p>
      )}
      <Field
        label={personForm.name}
        value={typed.name}
        autoComplete="off"
        maxLength={120}
        error={faultOf('name')}
        onChange={(event) => change({ name: event.target.value })}
      />
      {fixedEmail ? (
        <p className="text-ink-2">{personForm.signsInWith(typed.email)}</p>
      ) : (
        <Field
          label={personForm.eMail}
          type="email"
          value={typed.email}
          autoComplete="off"
          maxLength={254}
          error={faultOf('email')}
          onChange={(event) => change({ email: event.target.value })}
        />
      )}
      <fieldset disabled={fixedRole}>
        <legend className="mb-1 font-medium">{personForm.role}</legend>
        {ROLES.map((role) => (
          <label key={role} className="target flex items-center gap-2.5 py-1">
            <input
              type="radio"
              name="role"
              value={role}
              checked={typed.role === role}
              onChange={() => change({ role })}
              className="h-5 w-5 shrink-0 accent-[var(--petrol)]"
            />
            {ROLE_WORDS[role]}
          </label>
        ))}
        {fixedRole && <p className="text-sm text-ink-2">{personForm.ownRoleFixed}</p>}
      </fieldset>
      {typed.role === 'customer' && (
        <fieldset aria-describedby={faultOf('sites') ? 'sites-fault' : undefined}>
          <legend className="mb-1 font-medium">{personForm.sites}</legend>
          <div className="max-h-[240px] overflow-y-auto border border-rule px-3 py-1">
            {sites.map((site) => (
              <label key={site.id} className="target flex items-center gap-2.5">
                <input
                  type="checkbox"
                  checked={typed.sites.includes(site.id)}
                  onChange={(event) =>
                    change({
                      sites: event.target.checked
                        ? [...typed.sites, site.id]
                        : typed.sites.filter((id) => id !== site.id),
                    })
                  }
                  className="h-5 w-5 accent-[var(--petrol)]"
                />
                {site.name}
              </label>
            ))}
          </div>
          {faultOf('sites') && (
            <p id="sites-fault" role="alert" className="mt-1 text-sm font-medium text-rust-ink">
              {faultOf('sites')}
            </p>
          )}
        </fieldset>
      )}
      <div>
        <Button type="submit" weight="primary" disabled={busy}>
          {submit}
        </Button>
      </div>
    </form>
  );
}
