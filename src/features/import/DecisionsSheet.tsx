import { Button } from '../../components/ui/Button';
import { Choice } from '../../components/ui/Choice';
import { Sheet } from '../../components/ui/Sheet';
import { COLUMN_LABELS } from '../../domain/commissioning/import/columns';
import {
  bareName,
  inputName,
  type ImportChoices,
  type KnownNames,
  type NameColumn,
  type NewStringDefaults,
} from '../../domain/commissioning/import/table';
import { number } from '../../drawings/numbers';
import { paths } from '../../schemas/paths';
import type { CheckedFile } from './desk';

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
    <Sheet id="decisions" title="What only you can say">
      <div className="grid gap-6">
        {(askMark || askFill) && (
          <div className="grid items-end gap-4 sm:grid-cols-2 lg:grid-cols-3">
            {askMark && (
              <Choice
                label="Before the decimals stands"
                value={choices.decimalMark ?? ''}
                options={[
                  { value: '', label: 'choose: 1,234 has two meanings' },
                  { value: 'comma', label: 'a comma: 1,234 is a little over one' },
                  { value: 'point', label: 'a point: 1,234 is over a thousand' },
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
                Blank string cells mean the string above
              </label>
            )}
          </div>
        )}
        {(checked.unknownNames.length > 0 || meant) && (
          <div>
            <h3 className="mb-2 text-[15px]">Names in the file that mean nothing here yet</h3>
            <div className="grid gap-4 sm:grid-cols-2 lg:grid-cols-3">
              {checked.unknownNames.slice(0, 30).map(({ column, text, rows, suggestion }) => (
                <Choice
                  key={`${column} ${text}`}
                  label={`${COLUMN_LABELS[column]} “${text}”`}
                  value=""
                  options={[
                    { value: '', label: 'which one is meant?' },
                    ...namesOf(names, column).map((n) => ({
                      value: n,
                      label: n === suggestion ? `${n} (likely)` : n,
                    })),
                  ]}
                  onChange={(ours) => setMeaning(column, text, ours)}
                  hint={`in ${number(rows)} ${rows === 1 ? 'row' : 'rows'}`}
                />
              ))}
            </div>
            {meant && (
              <ul className="mt-3 grid gap-1 text-[15px]">
                {Object.entries(choices.meanings).flatMap(([column, words]) =>
                  Object.entries(words).map(([text, ours]) => (
                    <li key={`${column} ${text}`} className="flex flex-wrap items-center gap-2">
                      <span>
                        {COLUMN_LABELS[column as NameColumn]} “{text}” means <strong>{ours}</strong>
                      </span>
                      <button
                        type="button"
                        className="target px-2 text-petrol hover:underline"
                        onClick={() => {
                          const { [text]: _gone, ...rest } = words;
                          onChoices({ ...choices, meanings: { ...choices.meanings, [column]: rest } });
                        }}
                      >
                        take back
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
  const more = checked.newStrings.length > 8 ? ` and ${number(checked.newStrings.length - 8)} more` : '';
  if (!made)
    return (
      <div>
        <h3 className="mb-1 text-[15px]">
          {checked.newStrings.length === 1
            ? 'One string is'
            : `${number(checked.newStrings.length)} strings are`}{' '}
          not in the as-built yet
        </h3>
        <p className="mb-3 text-ink-2">
          {some}
          {more}. If the names are right, they can be made with this import.
        </p>
        <Button onClick={() => onChoices({ ...choices, newStrings: firstDefaults(names) })}>
          Make {checked.newStrings.length === 1 ? 'it' : 'them'}
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
          { value: '', label: list.length + extra.length > 0 ? 'as the file says' : 'none is entered yet' },
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
        New strings ({number(checked.newStrings.length)}) are made with
      </legend>
      <p className="mb-3 text-ink-2">
        {some}
        {more}. What the file says goes first; this is for the rest. Planes, inputs and zones are entered on
        the{' '}
        <a className="text-petrol hover:underline" href={paths.asBuilt(site)}>
          as-built page
        </a>
        .
      </p>
      <div className="grid gap-4 sm:grid-cols-2 lg:grid-cols-3">
        {pick('plane', 'Plane', names.planes)}
        {pick(
          'input',
          'Input',
          names.inputs.map((i) => inputName(i.inverter, i.number)),
          [{ value: 'each_next', label: 'each the next one without a string' }],
        )}
        {pick('zone', 'Zone', names.zones)}
        {pick(
          'unitType',
          'Unit type',
          names.unitTypes.map((t) => t.name),
        )}
        {pick('moduleType', 'Module type', names.moduleTypes)}
        {kind !== 'shutdown_only' && pick('logger', 'Logger', names.loggers)}
        {kind !== 'monitored' && kind !== 'optimizing' && names.transmitters.length > 0 && (
          <fieldset>
            <legend className="mb-1 font-medium">Transmitters</legend>
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
        Make no new strings
      </button>
    </fieldset>
  );
}
