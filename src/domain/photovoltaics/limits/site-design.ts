import { groupedBy } from '../../grouped-by';
import { connectorFindings } from './connector-design';
import { currentsOf, modulesOf, type BuiltSite } from './built-site';
import type { StringDesign } from './design';
import { DESIGN_CHECKS, type DesignFinding, type DesignOutcome } from './design-finding';
import { sharingFindings } from './input-design';
import { slotFindings } from './slot-design';
import { checkStringDesign } from './string-design';

export interface StringName {
  id: string;
  name: string;
}
export interface SiteDesignFinding extends DesignFinding {
  /** Names the finding among those of its site, as long as it stays the same. */
  key: string;
  /** The strings that it holds for, by name. */
  strings: readonly StringName[];
}

const RANK: Record<DesignOutcome, number> = { exceeded: 0, cannot_tell: 1, within: 2, not_required: 3 };
const byName = new Intl.Collator('en', { numeric: true, sensitivity: 'base' });

/** Findings that say the same of several strings, said once. */
function grouped(findings: readonly { string: StringName; finding: DesignFinding }[]): SiteDesignFinding[] {
  const groups = new Map<string, { strings: StringName[]; finding: DesignFinding }>();
  for (const { string, finding } of findings) {
    const same = JSON.stringify(finding);
    const known = groups.get(same);
    if (!known) groups.set(same, { strings: [string], finding });
    else if (!known.strings.some((s) => s.id === string.id)) known.strings.push(string);
  }
  return [...groups.values()].map(({ strings, finding }) => {
    strings.sort((a, b) => byName.compare(a.name, b.name));
    return { ...finding, strings, key: `${finding.check}: ${strings.map((s) => s.name).join(', ')}` };
  });
}

/**
 * Every design check of a site: what is exceeded first, then what can't be told. A string without a slot is left out.
 *
 * @throws RangeError naming a figure that no equipment can have
 */
export function checkSiteDesign(site: BuiltSite): SiteDesignFinding[] {
  const strings = site.strings.filter((s) => s.slots.length > 0);
  const onInput = groupedBy(strings, (string) => string.input.id);
  const all: { string: StringName; finding: DesignFinding }[] = [];
  for (const string of strings) {
    const name = { id: string.id, name: string.name };
    const parallel = onInput.get(string.input.id) ?? [string];
    const design: StringDesign = {
      modules: modulesOf(string),
      unit: string.unit,
      inverter: string.inverter,
      onInput: parallel.map(currentsOf),
      ruleSet: site.ruleSet,
      structure: site.structure,
      homeRunLeavesArray: string.homeRunLeavesArray,
      temperatures: site.temperatures,
    };
    const findings = [
      ...checkStringDesign(design),
      ...slotFindings(string),
      ...connectorFindings(string, site.connectors, site.pairs),
    ];
    for (const finding of findings) all.push({ string: name, finding });
  }
  for (const parallel of onInput.values())
    for (const finding of sharingFindings(parallel))
      for (const { id, name } of parallel) all.push({ string: { id, name }, finding });
  return grouped(all).sort(
    (a, b) =>
      RANK[a.outcome] - RANK[b.outcome] ||
      Number(b.safety) - Number(a.safety) ||
      DESIGN_CHECKS.indexOf(a.check) - DESIGN_CHECKS.indexOf(b.check) ||
      byName.compare(a.strings[0]?.name ?? '', b.strings[0]?.name ?? ''),
  );
}
