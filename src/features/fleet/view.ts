import type { FleetView } from '../../schemas/api/fleet';
import { fleetView } from '../../words/fleet';

export const FLEET_DEFAULTS: FleetView = { q: '', stage: 'any', show: 'all', sort: 'need', order: 'down' };

export const STAGES = [
  { value: 'any', label: fleetView.allStages },
  { value: 'commissioning', label: fleetView.commissioning },
  { value: 'operating', label: fleetView.operating },
] as const;

export const SHOWS = [
  { value: 'all', label: fleetView.allSites },
  { value: 'attention', label: fleetView.needsAttention },
  { value: 'shutdown', label: fleetView.inShutdown },
] as const;

const SORT_WORDS: Record<FleetView['sort'], readonly [down: string, up: string]> = {
  need: [fleetView.needsAttentionFirst, fleetView.needsAttentionLast],
  name: [fleetView.byName, fleetView.byNameFromThe],
  stage: [fleetView.commissioningFirst, fleetView.operatingFirst],
  units: [fleetView.mostUnitsFirst, fleetView.fewestUnitsFirst],
  ratio: [fleetView.highestPerformanceRatioFirst, fleetView.lowestPerformanceRatioFirst],
  power: [fleetView.mostPowerFirst, fleetView.leastPowerFirst],
};
export const sortInWords = (view: FleetView): string => SORT_WORDS[view.sort][view.order === 'down' ? 0 : 1];

/** Words sort from A, figures from the largest: what a first click on a column does. */
export const readsFromA = (sort: FleetView['sort']): boolean => sort === 'name' || sort === 'stage';

export const isFiltered = (view: FleetView): boolean =>
  view.q !== '' || view.stage !== 'any' || view.show !== 'all';
