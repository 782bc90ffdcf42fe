import { Sheet } from '../../components/ui/Sheet';
import { Tag } from '../../components/ui/Tag';
import { RULE_SETS, STRUCTURES } from '../../domain/commissioning/as-built/parts';
import { celsius } from '../../drawings/numbers';
import { fullTime } from '../../drawings/times';
import type { SiteDesign } from '../../schemas/api/design';
import { paths } from '../../schemas/paths';

const labelOf = (options: readonly { value: string; label: string }[], value: string): string =>
  options.find((o) => o.value === value)?.label ?? value;

/** What the checks were made with: the site's own figures, and what is only estimated. */
export function InputsSheet({ design }: { design: SiteDesign }) {
  const { coldest, hottest } = design.temperatures;
  const temperature = (t: SiteDesign['temperatures']['coldest']) => (
    <>
      {celsius(t.value)} {t.from === 'estimated' && <Tag tone="outline">Estimated</Tag>}
    </>
  );
  const estimated = coldest.from === 'estimated' || hottest.from === 'estimated';
  const facts = [
    { term: 'Coldest expected air', words: temperature(coldest) },
    { term: 'Hottest expected air', words: temperature(hottest) },
    { term: 'Structure', words: labelOf(STRUCTURES, design.structure) },
    { term: 'Rule set', words: labelOf(RULE_SETS, design.ruleSet) },
  ];
  return (
    <Sheet title="What the checks were made with" id="inputs" aside={fullTime(design.at, design.timeZone)}>
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
          Estimated temperatures follow from latitude and altitude alone, on the wide side: with them a limit
          can be found kept, not exceeded. NEC 690.7 names ASHRAE’s extreme annual mean minimum as one source
          of the real figure.{' '}
          <a className="link" href={paths.asBuilt(design.siteId)}>
            Enter the site’s own in the as-built
          </a>
          .
        </p>
      )}
      <p className="mt-3 max-w-[760px] text-sm text-ink-2">
        Datasheets, limits and behaviour of modules, units, connectors and inverters are{' '}
        <a className="link" href={paths.equipment()}>
          those of the catalogue
        </a>
        : a check is as right as its entry. Clauses are as quoted by others where no “from memory” stands
        beside them; the edition in force and the authority having jurisdiction decide.
      </p>
    </Sheet>
  );
}
