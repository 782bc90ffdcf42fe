import { useState } from 'react';
import { SearchInput } from '../../components/ui/SearchInput';
import { Segmented } from '../../components/ui/Segmented';
import { siteChoice } from '../../words/notices';

interface Props {
  sites: readonly { id: string; name: string }[];
  /** null: every site. */
  chosen: readonly string[] | null;
  error: string | null;
  hasHazards: boolean;
  onChange: (chosen: string[] | null) => void;
}
const SEARCH_FROM = 8;

/** Of which sites one is told. */
export function SiteChoice({ sites, chosen, error, hasHazards, onChange }: Props) {
  const [q, setQ] = useState('');
  const shown = sites.filter((s) => s.name.toLowerCase().includes(q.trim().toLowerCase()));
  return (
    <>
      <Segmented
        look="bold"
        label={siteChoice.ofWhichSites}
        options={[
          { value: 'all', label: siteChoice.everySite },
          { value: 'chosen', label: siteChoice.chosenSites },
        ]}
        value={chosen === null ? 'all' : 'chosen'}
        onChange={(value) => onChange(value === 'all' ? null : sites.map((s) => s.id))}
      />
      {hasHazards && chosen !== null && (
        <p className="mt-2 text-sm text-ink-2">{siteChoice.hazardsComeFromEvery}</p>
      )}
      {error && (
        <p role="alert" className="mt-2 text-sm font-medium text-rust-ink">
          {error}
        </p>
      )}
      {chosen !== null && (
        <fieldset className="mt-3">
          <legend className="sr-only">{siteChoice.sites}</legend>
          {sites.length >= SEARCH_FROM && (
            <SearchInput label={siteChoice.findASite} value={q} onChange={setQ} className="mb-2" />
          )}
          <div className="max-h-[320px] overflow-y-auto">
            {shown.map((site) => (
              <label key={site.id} className="flex min-h-[44px] items-center gap-2">
                <input
                  type="checkbox"
                  checked={chosen.includes(site.id)}
                  onChange={(event) =>
                    onChange(
                      event.target.checked ? [...chosen, site.id] : chosen.filter((id) => id !== site.id),
                    )
                  }
                  className="h-5 w-5 shrink-0 accent-petrol"
                />
                {site.name}
              </label>
            ))}
          </div>
        </fieldset>
      )}
    </>
  );
}
