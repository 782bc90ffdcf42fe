import type { FleetView } from '../../schemas/api/fleet';

export const FLEET_DEFAULTS: FleetView = { q: '', stage: 'any', show: 'all', sort: 'need', order: 'down' };

export const STAGES = [
  { value: 'any', label: 'All stages' },
  { value: 'commissioning', label: 'Commissioning' },
  { value: 'operating', label: 'Operating' },
] as const;

export const SHOWS = [
  { value: 'all', label: 'All sites' },
  { value: 'attention', label: 'Needs attention' },
  { value: 'shutdown', label: 'In shutdown' },
] as const;

const SORT_WORDS: Record<FleetView['sort'], readonly [down: string, up: string]> = {
  need: ['Needs attention first', 'Needs attention last'],
  name: ['By name', 'By name, from the end'],
  stage: ['Commissioning first', 'Operating first'],
  units: ['Most units first', 'Fewest units first'],
  ratio: ['Highest performance ratio first', 'Lowest performance ratio first'],
  power: ['Most power first', 'Least power first'],
};
export const sortInWords = (view: FleetView): string => SORT_WORDS[view.sort][view.order === 'down' ? 0 : 1];

/** Words sort from A, figures from the largest: what a first click on a column does. */
export const readsFromA = (sort: FleetView['sort']): boolean => sort === 'name' || sort === 'stage';

export const isFiltered = (view: FleetView): boolean =>
  view.q !== '' || view.stage !== 'any' || view.show !== 'all';
