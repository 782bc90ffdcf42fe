import { useState } from 'react';
import { Heading } from '../../components/ui/Heading';
import { counted } from '../../drawings/numbers';
import type { OrganisationSettings } from '../../schemas/api/settings';
import { paths } from '../../schemas/paths';
import { LogoSheet } from './LogoSheet';
import { OrganisationSheet } from './OrganisationSheet';
import { ThresholdsSheet } from './ThresholdsSheet';

/** What holds for a whole organisation. */
export function SettingsBoard({ initial, mayWrite }: { initial: OrganisationSettings; mayWrite: boolean }) {
  const [settings, setSettings] = useState(initial);
  const own = Object.keys(settings.thresholds).length;
  const props = { settings, mayWrite, onSaved: setSettings };
  return (
    <>
      <Heading
        finding={`Settings of ${settings.name}`}
        sentence={
          <>
            They hold for {counted(settings.sites, 'site')}.{' '}
            {own === 0
              ? 'Every judgement uses its default figures.'
              : `${counted(own, 'threshold differs', 'thresholds differ')} from the default.`}{' '}
            {mayWrite ? (
              <>
                Every change is{' '}
                <a className="link" href={`${paths.audit()}?area=settings`}>
                  on record
                </a>
                .
              </>
            ) : (
              'Managers change them.'
            )}
          </>
        }
      />
      <div className="grid gap-5">
        <OrganisationSheet {...props} />
        <LogoSheet {...props} />
        <ThresholdsSheet {...props} />
      </div>
    </>
  );
}
