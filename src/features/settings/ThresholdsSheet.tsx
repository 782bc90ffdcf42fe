import { useState } from 'react';
import { Button } from '../../components/ui/Button';
import { Field } from '../../components/ui/Field';
import { Sheet } from '../../components/ui/Sheet';
import { THRESHOLDS, type ThresholdFacts, type ThresholdKey } from '../../domain/settings/thresholds';
import { api } from '../../lib/api';
import type { OrganisationSettings } from '../../schemas/api/settings';
import { paths } from '../../schemas/paths';
import { Saved } from './Saved';
import { useSaving } from './use-saving';

interface Props {
  settings: OrganisationSettings;
  mayWrite: boolean;
  onSaved: (settings: OrganisationSettings) => void;
}

const written = ({ percent }: ThresholdFacts, value: number | undefined): string =>
  value === undefined ? '' : String(Number((percent ? value * 100 : value).toFixed(4)));

/** The figures of the judgements that may be set, with what each changes. */
export function ThresholdsSheet({ settings, mayWrite, onSaved }: Props) {
  const [typed, setTyped] = useState<Partial<Record<ThresholdKey, string>>>(() =>
    Object.fromEntries(THRESHOLDS.map((t) => [t.key, written(t, settings.thresholds[t.key])])),
  );
  const { busy, kept, fault, save, error } = useSaving(onSaved);
  return (
    <Sheet id="thresholds" title="Thresholds of the judgements" aside="empty: the default">
      <p className="mb-4 max-w-[76ch] text-ink-2">
        They hold from the next judgement on; what was judged before stays as it was. Limits of rapid shutdown
        (30 V, the rule set’s time) are no setting.
      </p>
      <form
        onSubmit={(event) => {
          event.preventDefault();
          void save(() =>
            api<OrganisationSettings>(paths.api.settingsThresholds(), { method: 'PUT', body: typed }),
          );
        }}
      >
        <fieldset disabled={!mayWrite || busy} className="grid gap-x-8 gap-y-5 md:grid-cols-2">
          <legend className="sr-only">Thresholds</legend>
          {THRESHOLDS.map((t) => (
            <Field
              key={t.key}
              label={t.name}
              unit={t.unit}
              inputMode="decimal"
              placeholder={written(t, t.initial ?? undefined)}
              value={typed[t.key] ?? ''}
              onChange={(event) => setTyped({ ...typed, [t.key]: event.target.value })}
              error={error(t.key)}
              hint={
                <>
                  {t.changes} Default: {t.defaultWords} ({t.source}).
                </>
              }
            />
          ))}
        </fieldset>
        {mayWrite && (
          <div className="mt-5 flex flex-wrap gap-3">
            <Button type="submit" weight="primary" disabled={busy}>
              {busy ? 'Saving' : 'Save the thresholds'}
            </Button>
            <Button disabled={busy} onClick={() => setTyped({})}>
              All defaults
            </Button>
          </div>
        )}
        <Saved kept={kept} fault={fault} />
      </form>
    </Sheet>
  );
}
