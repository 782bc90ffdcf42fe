import { keepPreviousData, queryOptions } from '@tanstack/react-query';
import { api, withQuery } from '../../lib/api';
import type {
  HistoryRange,
  StringHistory,
  StringPage,
  StringUnits,
  UnitQuantity,
} from '../../schemas/api/string';
import { paths } from '../../schemas/paths';

const MINUTE_MS = 60_000;

export const stringQuery = (id: string) =>
  queryOptions({
    queryKey: ['string', id],
    queryFn: ({ signal }) => api<StringPage>(paths.api.string(id), { signal }),
    refetchInterval: 5 * MINUTE_MS, // losses and events; what is live comes by /live
  });

export interface HistoryView {
  range: HistoryRange;
  /** The last day shown, at the site; null: today. */
  on: string | null;
}
/** A part of the range, epoch seconds. */
export interface Part {
  from: number;
  to: number;
}

const historyParameters = (view: HistoryView, part: Part | null) => ({
  range: view.range,
  on: view.on,
  from: part && Math.floor(part.from),
  to: part && Math.ceil(part.to),
});

export const historyQuery = (id: string, view: HistoryView, part: Part | null) =>
  queryOptions({
    queryKey: ['string', id, 'history', view, part],
    queryFn: ({ signal }) =>
      api<StringHistory>(paths.api.stringHistory(id), { query: historyParameters(view, part), signal }),
    refetchInterval: view.on === null ? MINUTE_MS : false,
    placeholderData: keepPreviousData,
  });

export const historyCsvHref = (id: string, view: HistoryView, part: Part | null): string =>
  withQuery(paths.api.stringHistoryCsv(id), historyParameters(view, part));

export interface UnitsView {
  quantity: UnitQuantity;
  on: string | null;
}
export const unitsQuery = (id: string, view: UnitsView) =>
  queryOptions({
    queryKey: ['string', id, 'units', view],
    queryFn: ({ signal }) =>
      api<StringUnits>(paths.api.stringUnits(id), {
        query: { quantity: view.quantity, on: view.on },
        signal,
      }),
    refetchInterval: view.on === null ? MINUTE_MS : false,
    placeholderData: keepPreviousData,
  });
export const unitsCsvHref = (id: string, view: UnitsView): string =>
  withQuery(paths.api.stringUnitsCsv(id), { quantity: view.quantity, on: view.on });
