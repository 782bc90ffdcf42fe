import { useState } from 'react';
import { Button } from '../../components/ui/Button';
import { Field } from '../../components/ui/Field';
import { Notice } from '../../components/ui/Notice';
import { Sheet } from '../../components/ui/Sheet';
import { ApiError, api } from '../../lib/api';
import type { NewTariff, SiteFigures } from '../../schemas/api/figures';
import { paths } from '../../schemas/paths';
import { pricesSheet } from '../../words/figures';

interface Props {
  site: string;
  today: string;
  currency: string | null;
  prices: SiteFigures['tariffs'];
  mayWrite: boolean;
}

const written = (price: number): string => String(price);

/** What a kWh is worth, from day to day; energy is priced at the price of its own day. */
export function PricesSheet({ site, today, currency, prices, mayWrite }: Props) {
  const [from, setFrom] = useState(today);
  const [price, setPrice] = useState('');
  const [fault, setFault] = useState<ApiError | null>(null);
  const [busy, setBusy] = useState(false);
  const run = async (call: () => Promise<unknown>): Promise<void> => {
    setBusy(true);
    setFault(null);
    try {
      await call();
      window.location.reload();
    } catch (error) {
      setFault(
        error instanceof ApiError ? error : new ApiError(0, pricesSheet.notSent, pricesSheet.itDidNotWork),
      );
      setBusy(false);
    }
  };
  return (
    <Sheet
      id="prices"
      title={pricesSheet.priceOfAkWh}
      aside={currency ?? pricesSheet.noCurrencySet}
      className="mt-5"
    >
      {currency === null && <p className="mb-3 text-ink-2">{pricesSheet.aManagerSetsThe}</p>}
      {prices.length === 0 ? (
        <p className="text-ink-2">{pricesSheet.noneIsSetSo}</p>
      ) : (
        <ul className="divide-y divide-rule-faint">
          {prices.map((p) => (
            <li key={p.id} className="flex flex-wrap items-center justify-between gap-x-4">
              <span className="min-h-[44px] py-2.5">
                {pricesSheet.fromWords(p.from)}
                <strong className="tabular-nums">{written(p.priceKWh)}</strong>
                {pricesSheet.setBy(currency, p.by)}
              </span>
              {mayWrite && (
                <Button
                  disabled={busy}
                  aria-label={pricesSheet.takeAwayThePrice(p.from)}
                  onClick={() => void run(() => api(paths.api.tariff(site, p.id), { method: 'DELETE' }))}
                >
                  {pricesSheet.takeAway}
                </Button>
              )}
            </li>
          ))}
        </ul>
      )}
      {mayWrite && (
        <form
          className="mt-4 grid gap-4 border-t border-rule-faint pt-4 sm:grid-cols-[220px_220px_auto] sm:items-start"
          onSubmit={(event) => {
            event.preventDefault();
            const body: NewTariff = { from, priceKWh: price };
            void run(() => api(paths.api.tariffs(site), { method: 'POST', body }));
          }}
        >
          <Field
            label={pricesSheet.from}
            type="date"
            value={from}
            onChange={(event) => setFrom(event.target.value)}
            error={fault?.fault('from') ?? null}
          />
          <Field
            label={pricesSheet.price}
            inputMode="decimal"
            placeholder="0.31"
            unit={currency ? `${currency}/kWh` : '/kWh'}
            value={price}
            onChange={(event) => setPrice(event.target.value)}
            error={fault?.fault('priceKWh') ?? null}
          />
          <Button type="submit" weight="primary" disabled={busy} className="sm:mt-7 sm:w-fit">
            {pricesSheet.setThisPrice}
          </Button>
        </form>
      )}
      {fault && fault.fields.length === 0 && (
        <div className="mt-3">
          <Notice kind="failed" title={fault.title}>
            {fault.message}
          </Notice>
        </div>
      )}
    </Sheet>
  );
}
