const NOTHING = 'export default {};';
const NEVER_DRAWN = `import Path from 'zrender/lib/graphic/Path.js';\nexport default class extends Path {}`;
const NO_SUCH_AXIS = `import Interval from './Interval.js';\nexport default class extends Interval {}`;

/**
 * Modules of the chart library that it always imports and that no chart of ours comes to, each with what the browser gets
 * for it: ours have one line chart over time, tooltips of their own words, no animation, no options of older versions.
 * Whoever gives a chart something new (components/charts/options.ts) looks here first.
 */
export const NOT_CHARTED: Readonly<Record<string, string>> = {
  // colours and words that none of ours has
  'echarts/lib/theme/dark.js': NOTHING,
  'echarts/lib/i18n/langZH.js': NOTHING,
  'echarts/lib/i18n/langEN.js':
    'export default { time: { month: [], monthAbbr: [], dayOfWeek: [], dayOfWeekAbbr: [] } };',
  // options as they were written for versions before 5
  'echarts/lib/preprocessor/backwardCompat.js':
    'export default (option) => { option.series = [].concat(option.series ?? []); };',
  // patterns on surfaces, the picture while something loads, pipelines of data sets
  'echarts/lib/util/decal.js': 'export const createOrUpdatePatternFromDecal = () => null;',
  'echarts/lib/loading/default.js': 'export default () => undefined;',
  'echarts/lib/data/helper/transform.js':
    'export const applyDataTransform = () => [];\nexport const registerExternalTransform = () => undefined;',
  // readouts that the library words itself
  'echarts/lib/component/tooltip/TooltipRichContent.js': 'export default class {}',
  'echarts/lib/component/tooltip/seriesFormatTooltip.js':
    'export const defaultSeriesFormatTooltip = () => undefined;',
  'echarts/lib/component/tooltip/tooltipMarkup.js': `
    export const createTooltipMarkup = (type, option) => ({ ...option, type });
    export const buildTooltipMarkup = () => '';
    export const retrieveVisualColorForTooltipMarker = () => '';
    export const getPaddingFromTooltipModel = (model) => model.get('padding') ?? 10;
    export class TooltipMarkupStyleCreator { makeTooltipMarker() { return ''; } }`,
  // a second axis that takes its ticks from the first, logarithms, categories
  'echarts/lib/coord/axisAlignTicks.js': 'export const scaleCalcAlign = () => undefined;',
  'echarts/lib/scale/Log.js': NO_SUCH_AXIS,
  'echarts/lib/scale/Ordinal.js': NO_SUCH_AXIS,
  // shapes of round charts and of a million points
  'zrender/lib/graphic/shape/Sector.js': NEVER_DRAWN,
  'zrender/lib/graphic/CompoundPath.js': NEVER_DRAWN,
  'zrender/lib/graphic/IncrementalDisplayable.js': NEVER_DRAWN,
  // how a movement begins and ends
  'zrender/lib/animation/easing.js': 'export default { linear: (k) => k };',
};
