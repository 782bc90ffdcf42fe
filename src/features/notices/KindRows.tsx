import { Choice } from '../../components/ui/Choice';
import { HOWS, type How, type NoticeKind } from '../../domain/notices/kinds';
import type { ChoicesPage } from '../../schemas/api/notices';
import { HOW_WORDS } from '../../words/notices-sentences';
import { kindRows } from '../../words/notices';

interface Props {
  kinds: ChoicesPage['kinds'];
  rules: Partial<Record<NoticeKind, How>>;
  onChange: (kind: NoticeKind, how: How) => void;
}

/** Each kind with what it means and how one is told of it. */
export function KindRows({ kinds, rules, onChange }: Props) {
  return (
    <ul className="divide-y divide-rule-faint">
      {kinds.map(({ kind, name, meaning, standard, fixed }) => (
        <li key={kind} className="grid gap-x-6 gap-y-2 py-3 sm:grid-cols-[minmax(0,1fr)_220px]">
          <div>
            <p className="font-semibold">{name}</p>
            <p className="text-ink-2">{meaning}</p>
            {fixed && <p className="mt-1 text-sm font-medium">{fixed}</p>}
          </div>
          {fixed ? (
            <p className="self-center font-medium">{HOW_WORDS[standard]}</p>
          ) : (
            <Choice
              quiet
              label={kindRows.howYouAreTold(name)}
              value={rules[kind] ?? standard}
              options={HOWS.map((how) => ({
                value: how,
                label: how === standard ? kindRows.howUsual(HOW_WORDS[how]) : HOW_WORDS[how],
              }))}
              onChange={(value) => {
                const how = HOWS.find((h) => h === value);
                if (how) onChange(kind, how);
              }}
            />
          )}
        </li>
      ))}
    </ul>
  );
}
