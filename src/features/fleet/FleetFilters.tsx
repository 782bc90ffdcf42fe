import { ButtonLink } from '../../components/ui/Button';
import { SearchInput } from '../../components/ui/SearchInput';
import { Segmented } from '../../components/ui/Segmented';
import { withQuery } from '../../lib/api';
import type { FleetView } from '../../schemas/api/fleet';
import { paths } from '../../schemas/paths';
import { SHOWS, STAGES } from './view';
import { fleetFilters } from '../../words/fleet';

interface Props {
  view: FleetView;
  onChange: (some: Partial<FleetView>, how?: 'typed' | 'chosen') => void;
}

/** Search, filters and the download of the fleet's table. Without scripts the form does the same by the address. */
export function FleetFilters({ view, onChange }: Props) {
  return (
    <form
      action={paths.fleet()}
      className="no-print mb-3 flex flex-wrap items-center gap-x-5 gap-y-2"
      onSubmit={(event) => event.preventDefault()}
    >
      <SearchInput
        name="q"
        label={fleetFilters.filterSitesByName}
        placeholder={fleetFilters.filterByNameOr}
        value={view.q}
        onChange={(typed) => onChange({ q: typed }, 'typed')}
      />
      <Segmented
        label={fleetFilters.whichSites}
        options={SHOWS}
        value={view.show}
        onChange={(show) => onChange({ show })}
      />
      <Segmented
        label={fleetFilters.stage}
        options={STAGES}
        value={view.stage}
        onChange={(stage) => onChange({ stage })}
      />
      <ButtonLink href={withQuery(paths.api.fleetCsv(), view)} download className="ml-auto !text-sm">
        CSV
      </ButtonLink>
    </form>
  );
}
