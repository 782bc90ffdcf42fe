import { Button } from '../../components/ui/Button';
import { Choice } from '../../components/ui/Choice';
import { Sheet } from '../../components/ui/Sheet';
import { COLUMN_LABELS } from '../../words/domain-import';
import {
  bareName,
  inputName,
  type ImportChoices,
  type KnownNames,
  type NameColumn,
  type NewStringDefaults,
} from '../../domain/commissioning/import/table';
import { paths } from '../../schemas/paths';
import type { CheckedFile } from './desk';
import { decisionsSheet } from '../../words/import';

interface Props {
  site: string;
  names: KnownNames;
  checked: CheckedFile;
  choices: ImportChoices;
  onChoices: (choices: ImportChoices) => void;
}

const namesOf = (names: KnownNames, column: NameColumn): readonly string[] =>
  ({
    unitType: names.unitTypes.map((t) => t.name),
    moduleType: names.moduleTypes,
    plane: names.planes,
    inverter: [...new Set(names.inputs.map((i) => i.inverter))],
    zone: names.zones,
    logger: names.loggers,
    transmitters: names.transmitters,
  })[column];

const only = (list: readonly string[]): string | null => (list.length === 1 ? (list[0] ?? null) : null);

/** What new strings begin with: what there is only one of is chosen already. */
export const firstDefaults = (names: KnownNames): NewStringDefaults => ({
  plane: only(names.planes),
  input: 'each_next',
  zone: only(names.zones),
  unitType: only(names.unitTypes.map((t) => t.name)),
  moduleType: only(names.moduleTypes),
  logger: only(names.loggers),
  transmitters: names.transmitters.length === 1 ? names.transmitters : [],
});

/** What only the person can say: the decimal mark, blank cells, foreign names, and what new strings are made with. */
export function DecisionsSheet({ site, names, checked, choices, onChoices }: Props) {
  const has = (code: string) => checked.faults.some((f) => f.code === code);
  const askMark = has('number_ambiguous') || choices.decimalMark !== null;
  const askFill = has('string_empty') || choices.fillDown;
  const meant = Object.values(choices.meanings).some((m) => Object.keys(m).length > 0);
  const askStrings = checked.newStrings.length > 0;
  if (!askMark && !askFill && !askStrings && checked.unknownNames.length === 0 && !meant) return null;
  const setMeaning = (column: NameColumn, text: string, ours: string) =>
    onChoices({
      ...choices,
      meanings: { ...choices.meanings, [column]: { ...choices.meanings[column], [bareName(text)]: ours } },
    });
  return (
    <Sheet id="decisions" title={decisionsSheet.whatOnlyYouCan}>
      <div className="grid gap-6">
        {(askMark || askFill) && (
          <div className="grid items-end gap-4 sm:grid-cols-2 lg:grid-cols-3">
            {askMark && (
              <Choice
                label={decisionsSheet.beforeTheDecimalsStands}
                value={choices.decimalMark ?? ''}
                options={[
                  { value: '', label: decisionsSheet.choose1234Has },
                  { value: 'comma', label: decisionsSheet.aComma1234 },
                  { value: 'point', label: decisionsSheet.aPoint1234 },
                ]}
                onChange={(v) =>
                  onChoices({ ...choices, decimalMark: v === 'comma' || v === 'point' ? v : null })
                }
              />
            )}
            {askFill && (
              <label className="flex min-h-[44px] items-center gap-3 text-[15px]">
                <input
                  type="checkbox"
                  className="h-5 w-5"
                  checked={choices.fillDown}
                  onChange={(event) => onChoices({ ...choices, fillDown: event.target.checked })}
                />
                {decisionsSheet.blankStringCellsMean}
              </label>
            )}
          </div>
        )}
        {(checked.unknownNames.length > 0 || meant) && (
          <div>
            <h3 className="mb-2 text-[15px]">{decisionsSheet.namesInTheFile}</h3>
            <div className="grid gap-4 sm:grid-cols-2 lg:grid-cols-3">
              {checked.unknownNames.slice(0, 30).map(({ column, text, rows, suggestion }) => (
                <Choice
                  key={`${column} ${text}`}
                  label={`${COLUMN_LABELS[column]} “${text}”`}
                  value=""
                  options={[
                    { value: '', label: decisionsSheet.whichOneIsMeant },
                    ...namesOf(names, column).map((n) => ({
                      value: n,
                      label: n === suggestion ? decisionsSheet.nLikely(n) : n,
                    })),
                  ]}
                  onChange={(ours) => setMeaning(column, text, ours)}
                  hint={decisionsSheet.inRows(rows)}
                />
              ))}
            </div>
            {meant && (
              <ul className="mt-3 grid gap-1 text-[15px]">
                {Object.entries(choices.meanings).flatMap(([column, words]) =>
                  Object.entries(words).map(([text, ours]) => (
                    <li key={`${column} ${text}`} className="flex flex-wrap items-center gap-2">
                      <span>
                        {decisionsSheet.columnTextMeans(COLUMN_LABELS[column as NameColumn], text)}
                        <strong>{ours}</strong>
                      </span>
                      <button
                        type="button"
                        className="target px-2 text-petrol hover:underline"
                        onClick={() => {
                          const { [text]: _gone, ...rest } = words;
                          onChoices({ ...choices, meanings: { ...choices.meanings, [column]: rest } });
                        }}
                      >
                        {decisionsSheet.takeBack}
                      </button>
                    </li>
                  )),
                )}
              </ul>
            )}
          </div>
        )}
        {askStrings && <NewStrings {...{ site, names, checked, choices, onChoices }} />}
      </div>
    </Sheet>
  );
}

function NewStrings({ site, names, checked, choices, onChoices }: Props) {
  const made = choices.newStrings;
  const some = checked.newStrings.slice(0, 8).join(', ');
  const more = checked.newStrings.length > 8 ? decisionsSheet.andMore(checked.newStrings.length) : '';
  if (!made)
    return (
      <div>
        <h3 className="mb-1 text-[15px]">{decisionsSheet.newStrings1OneString(checked.newStrings.length)}</h3>
        <p className="mb-3 text-ink-2">{decisionsSheet.ifTheNamesAre(some, more)}</p>
        <Button onClick={() => onChoices({ ...choices, newStrings: firstDefaults(names) })}>
          {decisionsSheet.makeNewStrings(checked.newStrings.length)}
        </Button>
      </div>
    );
  const pick = (
    key: keyof NewStringDefaults,
    label: string,
    list: readonly string[],
    extra: { value: string; label: string }[] = [],
  ) => {
    const value = made[key];
    return (
      <Choice
        label={label}
        value={typeof value === 'string' ? value : ''}
        options={[
          {
            value: '',
            label:
              list.length + extra.length > 0 ? decisionsSheet.asTheFileSays : decisionsSheet.noneIsEnteredYet,
          },
          ...extra,
          ...list.map((n) => ({ value: n, label: n })),
        ]}
        onChange={(v) => onChoices({ ...choices, newStrings: { ...made, [key]: v === '' ? null : v } })}
      />
    );
  };
  const kind = names.unitTypes.find((t) => t.name === made.unitType)?.kind;
  return (
    <fieldset>
      <legend className="mb-1 text-[15px] font-semibold">
        {decisionsSheet.newStringsAreMade(checked.newStrings.length)}
      </legend>
      <p className="mb-3 text-ink-2">
        {decisionsSheet.whatTheFileSays(some, more)}
        <a className="text-petrol hover:underline" href={paths.asBuilt(site)}>
          {decisionsSheet.asBuiltPage}
        </a>
        .
      </p>
      <div className="grid gap-4 sm:grid-cols-2 lg:grid-cols-3">
        {pick('plane', decisionsSheet.plane, names.planes)}
        {pick(
          'input',
          decisionsSheet.input,
          names.inputs.map((i) => inputName(i.inverter, i.number)),
          [{ value: 'each_next', label: decisionsSheet.eachTheNextOne }],
        )}
        {pick('zone', decisionsSheet.zone, names.zones)}
        {pick(
          'unitType',
          decisionsSheet.unitType,
          names.unitTypes.map((t) => t.name),
        )}
        {pick('moduleType', decisionsSheet.moduleType, names.moduleTypes)}
        {kind !== 'shutdown_only' && pick('logger', decisionsSheet.logger, names.loggers)}
        {kind !== 'monitored' && kind !== 'optimizing' && names.transmitters.length > 0 && (
          <fieldset>
            <legend className="mb-1 font-medium">{decisionsSheet.transmitters}</legend>
            <div className="flex flex-wrap gap-x-4">
              {names.transmitters.map((t) => (
                <label key={t} className="flex min-h-[44px] items-center gap-2">
                  <input
                    type="checkbox"
                    className="h-5 w-5"
                    checked={made.transmitters.includes(t)}
                    onChange={(event) =>
                      onChoices({
                        ...choices,
                        newStrings: {
                          ...made,
                          transmitters: event.target.checked
                            ? [...made.transmitters, t]
                            : made.transmitters.filter((x) => x !== t),
                        },
                      })
                    }
                  />
                  {t}
                </label>
              ))}
            </div>
          </fieldset>
        )}
      </div>
      <button
        type="button"
        className="target mt-2 text-petrol hover:underline"
        onClick={() => onChoices({ ...choices, newStrings: null })}
      >
        {decisionsSheet.makeNoNewStrings}
      </button>
    </fieldset>
  );
}
