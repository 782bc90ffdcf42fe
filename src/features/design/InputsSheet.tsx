import { Sheet } from '../../components/ui/Sheet';
import { Tag } from '../../components/ui/Tag';
import { RULE_SETS, STRUCTURES } from '../../domain/commissioning/as-built/parts';
import { celsius } from '../../drawings/numbers';
import { fullTime } from '../../drawings/times';
import type { SiteDesign } from '../../schemas/api/design';
import { paths } from '../../schemas/paths';
import { inputsSheet } from '../../words/design';

const labelOf = (options: readonly { value: string; label: string }[], value: string): string =>
  options.find((o) => o.value === value)?.label ?? value;

/** What the checks were made with: the site's own figures, and what is only estimated. */
export function InputsSheet({ design }: { design: SiteDesign }) {
  const { coldest, hottest } = design.temperatures;
  const temperature = (t: SiteDesign['temperatures']['coldest']) => (
    <>
      {celsius(t.value)} {t.from === 'estimated' && <Tag tone="outline">{inputsSheet.estimated}</Tag>}
    </>
  );
  const estimated = coldest.from === 'estimated' || hottest.from === 'estimated';
  const facts = [
    { term: inputsSheet.coldestExpectedAir, words: temperature(coldest) },
    { term: inputsSheet.hottestExpectedAir, words: temperature(hottest) },
    { term: inputsSheet.structure, words: labelOf(STRUCTURES, design.structure) },
    { term: inputsSheet.ruleSet, words: labelOf(RULE_SETS, design.ruleSet) },
  ];
  return (
    <Sheet title={inputsSheet.whatTheChecksWere} id="inputs" aside={fullTime(design.at, design.timeZone)}>
      <dl className="grid gap-x-8 gap-y-3 sm:grid-cols-2 lg:grid-cols-4">
        {facts.map((fact) => (
          <div key={fact.term}>
            <dt className="text-sm text-ink-2">{fact.term}</dt>
            <dd className="font-medium">{fact.words}</dd>
          </div>
        ))}
      </dl>
      {estimated && (
        <p className="mt-3 max-w-[760px]">
          {inputsSheet.estimatedTemperaturesFollowFrom}
          <a className="link" href={paths.asBuilt(design.siteId)}>
            {inputsSheet.enterTheSitesOwn}
          </a>
          .
        </p>
      )}
      <p className="mt-3 max-w-[760px] text-sm text-ink-2">
        {inputsSheet.datasheetsLimitsAndBehaviour}
        <a className="link" href={paths.equipment()}>
          {inputsSheet.thoseOfTheCatalogue}
        </a>
        {inputsSheet.aCheckIsAs}
      </p>
    </Sheet>
  );
}
