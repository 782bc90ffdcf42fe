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
import { thresholdsSheet } from '../../words/settings';

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
    <Sheet
      id="thresholds"
      title={thresholdsSheet.thresholdsOfTheJudgements}
      aside={thresholdsSheet.emptyTheDefault}
    >
      <p className="mb-4 max-w-[76ch] text-ink-2">{thresholdsSheet.theyHoldFromThe}</p>
      <form
        onSubmit={(event) => {
          event.preventDefault();
          void save(() =>
            api<OrganisationSettings>(paths.api.settingsThresholds(), { method: 'PUT', body: typed }),
          );
        }}
      >
        <fieldset disabled={!mayWrite || busy} className="grid gap-x-8 gap-y-5 md:grid-cols-2">
          <legend className="sr-only">{thresholdsSheet.thresholds}</legend>
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
              hint={<>{thresholdsSheet.changesDefaultAndSource(t.changes, t.defaultWords, t.source)}</>}
            />
          ))}
        </fieldset>
        {mayWrite && (
          <div className="mt-5 flex flex-wrap gap-3">
            <Button type="submit" weight="primary" disabled={busy}>
              {busy ? thresholdsSheet.saving : thresholdsSheet.saveTheThresholds}
            </Button>
            <Button disabled={busy} onClick={() => setTyped({})}>
              {thresholdsSheet.allDefaults}
            </Button>
          </div>
        )}
        <Saved kept={kept} fault={fault} />
      </form>
    </Sheet>
  );
}
