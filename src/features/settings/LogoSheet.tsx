import { useState } from 'react';
import { Button } from '../../components/ui/Button';
import { Sheet } from '../../components/ui/Sheet';
import { api } from '../../lib/api';
import { uploadFile } from '../../lib/upload';
import type { OrganisationSettings } from '../../schemas/api/settings';
import { paths } from '../../schemas/paths';
import { Saved } from './Saved';
import { useSaving } from './use-saving';
import { logoSheet } from '../../words/settings';

interface Props {
  settings: OrganisationSettings;
  mayWrite: boolean;
  onSaved: (settings: OrganisationSettings) => void;
}

/** The organisation's own mark, for its customers' pages and its reports. */
export function LogoSheet({ settings, mayWrite, onSaved }: Props) {
  const [share, setShare] = useState<number | null>(null);
  const { busy, kept, fault, save, error } = useSaving(onSaved);
  const { logo } = settings;
  return (
    <Sheet id="logo" title={logoSheet.logo}>
      {logo ? (
        <img
          src={paths.api.logo(logo)}
          alt={logoSheet.logoOf(settings.name)}
          className="max-h-[96px] max-w-full border border-rule-faint bg-[#fff] p-3"
        />
      ) : (
        <p className="text-ink-2">{logoSheet.noneYetItStands}</p>
      )}
      {mayWrite && (
        <div className="mt-4 flex flex-wrap items-end gap-3">
          <label className="block">
            <span className="mb-1 block font-medium">
              {logo ? logoSheet.anotherPicture : logoSheet.aPicture}
            </span>
            <input
              type="file"
              accept="image/png,image/jpeg,image/webp"
              disabled={busy}
              className="block min-h-[44px] max-w-full text-[16px] file:mr-3 file:min-h-[44px] file:rounded file:border file:border-solid file:border-rule file:bg-sheet file:px-4 file:text-ink"
              onChange={(event) => {
                const file = event.target.files?.[0];
                event.target.value = '';
                if (!file) return;
                void save(() => uploadFile<OrganisationSettings>(paths.api.logo(), file, setShare)).finally(
                  () => setShare(null),
                );
              }}
            />
          </label>
          {logo && (
            <Button
              disabled={busy}
              onClick={() =>
                void save(() => api<OrganisationSettings>(paths.api.logo(), { method: 'DELETE' }))
              }
            >
              {logoSheet.takeItAway}
            </Button>
          )}
        </div>
      )}
      <p className="mt-2 text-sm text-ink-2">
        {logoSheet.pngJpegOrWebP}
        {share !== null && logoSheet.roundSent(Math.round(share * 100))}
      </p>
      {error('body') && (
        <p role="alert" className="mt-2 text-sm font-medium text-rust-ink">
          {error('body')}
        </p>
      )}
      {!error('body') && <Saved kept={kept} fault={fault} />}
    </Sheet>
  );
}
