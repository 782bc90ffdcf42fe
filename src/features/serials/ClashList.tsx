import { useState } from 'react';
import { Button } from '../../components/ui/Button';
import { Field } from '../../components/ui/Field';
import type { Entry, WalkString } from './model';
import { clashList } from '../../words/serials';

interface Props {
  clashes: readonly Entry[];
  strings: readonly WalkString[];
  onInsist: (key: string, reason: string) => void;
  onDrop: (key: string) => void;
}

/** What the server would not take as it was: somebody else was there, or the unit sits elsewhere. */
export function ClashList({ clashes, strings, onInsist, onDrop }: Props) {
  return (
    <ul className="grid gap-3">
      {clashes.map((entry) => (
        <Clash
          key={entry.key}
          entry={entry}
          place={clashList.place(strings.find((s) => s.id === entry.string)?.name, entry.position)}
          onInsist={onInsist}
          onDrop={onDrop}
        />
      ))}
    </ul>
  );
}

function Clash({
  entry,
  place,
  onInsist,
  onDrop,
}: {
  entry: Entry;
  place: string;
  onInsist: Props['onInsist'];
  onDrop: Props['onDrop'];
}) {
  const [reason, setReason] = useState('');
  const [fault, setFault] = useState<string | null>(null);
  return (
    <li className="border border-rust bg-rust-wash p-4 text-[15px] text-rust-ink">
      <div role="alert">
        <p className="font-medium">{clashList.atWasNotKept(entry.serial, place)}</p>
        <p>{entry.clash?.message}</p>
      </div>
      {entry.clash?.kind !== 'other' && (
        <Field
          className="mt-3 text-ink"
          label={clashList.whyYoursIsRight}
          value={reason}
          onChange={(event) => {
            setReason(event.target.value);
            setFault(null);
          }}
          error={fault}
        />
      )}
      <div className="mt-3 flex flex-wrap gap-2">
        {entry.clash?.kind !== 'other' && (
          <Button
            onClick={() =>
              reason.trim().length < 3 ? setFault(clashList.sayWhyInA) : onInsist(entry.key, reason.trim())
            }
          >
            {clashList.putThere(entry.serial)}
          </Button>
        )}
        <Button onClick={() => onDrop(entry.key)}>{clashList.leaveItAsIt}</Button>
      </div>
    </li>
  );
}
