import { DESIGN_CHECKS } from '../../domain/photovoltaics/limits/design-finding';
import type { DesignView, SiteDesign, SiteDesignItem } from '../../schemas/api/design';
import { CHECK_WORDS, stringsInShort } from '../../words/design-sentences';

export const DESIGN_DEFAULTS: DesignView = { q: '', show: 'open', sort: 'gravity', order: 'down' };

const SORT: Record<DesignView['sort'], (a: SiteDesignItem, b: SiteDesignItem) => number> = {
  gravity: () => 0, // as they come: exceeded first
  check: (a, b) => DESIGN_CHECKS.indexOf(a.check) - DESIGN_CHECKS.indexOf(b.check),
  strings: (a, b) => b.strings.length - a.strings.length,
};

/** The findings that a view shows, in its order. */
export function shownFindings(design: SiteDesign, view: DesignView): SiteDesignItem[] {
  const wanted = view.q.toLocaleLowerCase('en');
  const words = (f: SiteDesignItem) =>
    `${CHECK_WORDS[f.check]} ${f.words} ${f.clause} ${stringsInShort(f.strings)} ${f.strings.map((s) => s.name).join(' ')}`.toLocaleLowerCase(
      'en',
    );
  const shown = design.findings.filter(
    (f) =>
      (view.show === 'all' ||
        (view.show === 'open'
          ? f.outcome === 'exceeded' || f.outcome === 'cannot_tell'
          : f.outcome === view.show)) &&
      (wanted === '' || words(f).includes(wanted)),
  );
  const sorted = shown
    .map((finding, i) => ({ finding, i }))
    .sort((a, b) => SORT[view.sort](a.finding, b.finding) || a.i - b.i)
    .map(({ finding }) => finding);
  return view.order === 'down' ? sorted : sorted.reverse();
}
