import { keepPreviousData, queryOptions } from '@tanstack/react-query';
import { api, withQuery } from '../../lib/api';
import type { Annotation } from '../../schemas/api/annotations';
import type {
  HistoryQuantity,
  HistoryRange,
  StringHistory,
  StringPage,
  StringUnits,
  UnitQuantity,
} from '../../schemas/api/string';
import type { StringExplanations, StringHeat, StringLoop, StringMoment } from '../../schemas/api/workbench';
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
  quantity: HistoryQuantity;
  /** Each sibling's own line too. */
  each: boolean;
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
  quantity: view.quantity,
  siblings: view.each ? 'each' : null,
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
  range: 'day' | 'week' | 'month';
  on: string | null;
  /** With commas. */
  positions: string;
}
export const unitsQuery = (id: string, view: UnitsView) =>
  queryOptions({
    queryKey: ['string', id, 'units', view],
    queryFn: ({ signal }) => api<StringUnits>(paths.api.stringUnits(id), { query: { ...view }, signal }),
    refetchInterval: view.on === null ? MINUTE_MS : false,
    placeholderData: keepPreviousData,
  });
export const unitsCsvHref = (id: string, view: UnitsView): string =>
  withQuery(paths.api.stringUnitsCsv(id), { ...view });

/** The string at a minute of the past, epoch s. */
export const momentQuery = (id: string, at: number) =>
  queryOptions({
    queryKey: ['string', id, 'moment', at],
    queryFn: ({ signal }) => api<StringMoment>(paths.api.stringMoment(id), { query: { at }, signal }),
    placeholderData: keepPreviousData,
    staleTime: 10 * MINUTE_MS,
  });

export const heatQuery = (id: string, quantity: UnitQuantity, on: string | null) =>
  queryOptions({
    queryKey: ['string', id, 'heat', quantity, on],
    queryFn: ({ signal }) => api<StringHeat>(paths.api.stringHeat(id), { query: { quantity, on }, signal }),
    refetchInterval: on === null ? 5 * MINUTE_MS : false,
    placeholderData: keepPreviousData,
  });

export const loopQuery = (id: string, on: string | null) =>
  queryOptions({
    queryKey: ['string', id, 'loop', on],
    queryFn: ({ signal }) => api<StringLoop>(paths.api.stringLoop(id), { query: { on }, signal }),
    staleTime: 5 * MINUTE_MS,
    placeholderData: keepPreviousData,
  });

export const explanationsQuery = (id: string, on: string | null) =>
  queryOptions({
    queryKey: ['string', id, 'explanations', on],
    queryFn: ({ signal }) =>
      api<StringExplanations>(paths.api.stringExplanations(id), { query: { on }, signal }),
    staleTime: 5 * MINUTE_MS,
    placeholderData: keepPreviousData,
  });

export const notesQuery = (site: string, string: string) =>
  queryOptions({
    queryKey: ['annotations', site, string],
    queryFn: ({ signal }) => api<Annotation[]>(paths.api.annotations(site), { query: { string }, signal }),
    refetchInterval: 5 * MINUTE_MS,
  });
