import { paths } from '../../schemas/paths';
import type { CustomerSites } from '../../schemas/api/customer';
import { Notice } from '../../components/ui/Notice';
import { Sheet } from '../../components/ui/Sheet';
import { customerWords } from '../../words/customer-sentences';
import { roofList } from '../../words/customer';

const NO_DAY = { energy: null, clearEnergyUntilNow: 0 };

/** Each roof with its heading; the page behind it says the rest. */
export function RoofList({ sites, organisation }: { sites: CustomerSites; organisation: string }) {
  if (sites.length === 0)
    return (
      <Notice kind="empty" title={roofList.noRoofYet}>
        {roofList.askForAccess(organisation)}
      </Notice>
    );
  return (
    <ul className="grid gap-4">
      {sites.map((site) => {
        const words = customerWords(site.now, NO_DAY, site.timeZone, { organisation });
        return (
          <li key={site.id}>
            <Sheet>
              <h2 className="text-lg">
                <a className="link inline-flex min-h-[44px] items-center" href={paths.customer(site.id)}>
                  {site.name}
                </a>
              </h2>
              <p className="text-[17px] leading-6">{words.heading}</p>
              {site.place && <p className="mt-1 text-ink-2">{site.place}</p>}
            </Sheet>
          </li>
        );
      })}
    </ul>
  );
}
