import { useState } from 'react';
import { Heading } from '../../components/ui/Heading';
import type { OrganisationSettings } from '../../schemas/api/settings';
import { paths } from '../../schemas/paths';
import { LogoSheet } from './LogoSheet';
import { OrganisationSheet } from './OrganisationSheet';
import { ThresholdsSheet } from './ThresholdsSheet';
import { settingsBoard } from '../../words/settings';

/** What holds for a whole organisation. */
export function SettingsBoard({ initial, mayWrite }: { initial: OrganisationSettings; mayWrite: boolean }) {
  const [settings, setSettings] = useState(initial);
  const own = Object.keys(settings.thresholds).length;
  const props = { settings, mayWrite, onSaved: setSettings };
  return (
    <>
      <Heading
        finding={settingsBoard.settingsOf(settings.name)}
        sentence={
          <>
            {settingsBoard.theyHoldForSites(settings.sites, own)}
            {mayWrite ? (
              <>
                {settingsBoard.everyChangeIs}
                <a className="link" href={`${paths.audit()}?area=settings`}>
                  {settingsBoard.onRecord}
                </a>
                .
              </>
            ) : (
              settingsBoard.managersChangeThem
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
