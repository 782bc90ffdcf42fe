import { useState } from 'react';
import { Button } from '../../components/ui/Button';
import { Choice } from '../../components/ui/Choice';
import { Field } from '../../components/ui/Field';
import { Sheet } from '../../components/ui/Sheet';
import { api } from '../../lib/api';
import type { OrganisationSettings } from '../../schemas/api/settings';
import { CURRENCIES } from '../../schemas/lists-and-limits';
import { paths } from '../../schemas/paths';
import { Saved } from './Saved';
import { useSaving } from './use-saving';
import { organisationSheet } from '../../words/settings';

interface Props {
  settings: OrganisationSettings;
  mayWrite: boolean;
  onSaved: (settings: OrganisationSettings) => void;
}

/** Name, how to reach it, its clock, its money, its units, and how long raw readings are shown. */
export function OrganisationSheet({ settings, mayWrite, onSaved }: Props) {
  const [name, setName] = useState(settings.name);
  const [phone, setPhone] = useState(settings.phone);
  const [timeZone, setTimeZone] = useState(settings.timeZone);
  const [currency, setCurrency] = useState(settings.currency ?? '');
  const [units, setUnits] = useState(settings.units);
  const [hide, setHide] = useState(
    settings.hideRawAfterDays === null ? '' : String(settings.hideRawAfterDays),
  );
  const { busy, kept, fault, save, error } = useSaving(onSaved);
  return (
    <Sheet id="organisation" title={organisationSheet.organisation}>
      <form
        onSubmit={(event) => {
          event.preventDefault();
          void save(() =>
            api<OrganisationSettings>(paths.api.settingsOrganisation(), {
              method: 'PUT',
              body: {
                name,
                phone,
                timeZone,
                currency: currency === '' ? null : currency,
                units,
                hideRawAfterDays: hide.trim() === '' ? null : Number(hide),
              },
            }),
          );
        }}
      >
        <fieldset disabled={!mayWrite || busy} className="grid gap-x-6 gap-y-4 sm:grid-cols-2">
          <legend className="sr-only">{organisationSheet.organisation}</legend>
          <Field
            label={organisationSheet.name}
            value={name}
            onChange={(e) => setName(e.target.value)}
            error={error('name')}
            required
          />
          <Field
            label={organisationSheet.telephone}
            type="tel"
            value={phone}
            onChange={(e) => setPhone(e.target.value)}
            error={error('phone')}
            hint={organisationSheet.standsOnYourCustomers}
          />
          <Choice
            label={organisationSheet.timeZone}
            value={timeZone}
            onChange={setTimeZone}
            options={settings.timeZones.map((zone) => ({ value: zone, label: zone.replaceAll('_', ' ') }))}
            hint={organisationSheet.forTimesThatBelong}
            error={error('timeZone')}
          />
          <Choice
            label={organisationSheet.money}
            value={currency}
            onChange={setCurrency}
            options={[
              { value: '', label: organisationSheet.noMoney },
              ...CURRENCIES.map((code) => ({ value: code, label: code })),
            ]}
            hint={organisationSheet.moneyHint}
            error={error('currency')}
          />
          <Choice
            label={organisationSheet.temperatures}
            value={units}
            onChange={(wanted) => setUnits(wanted === 'imperial' ? 'imperial' : 'metric')}
            options={[
              { value: 'metric', label: organisationSheet.inC },
              { value: 'imperial', label: organisationSheet.inF },
            ]}
            hint={organisationSheet.whatIsReadData}
            error={error('units')}
          />
          <Field
            label={organisationSheet.rawReadingsAreShown}
            inputMode="numeric"
            unit="days"
            value={hide}
            placeholder="90"
            onChange={(e) => setHide(e.target.value)}
            error={error('hideRawAfterDays')}
            hint={organisationSheet.retentionHint}
          />
        </fieldset>
        {mayWrite && (
          <Button type="submit" weight="primary" disabled={busy} className="mt-4">
            {busy ? organisationSheet.saving : organisationSheet.save}
          </Button>
        )}
        <Saved kept={kept} fault={fault} />
      </form>
    </Sheet>
  );
}
