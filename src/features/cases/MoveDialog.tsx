import { useState } from 'react';
import { Button } from '../../components/ui/Button';
import { Dialog } from '../../components/ui/Dialog';
import { CASE_STATE_WORDS, type CaseState } from '../../domain/cases/cases';
import { TextArea } from './TextArea';

interface Props {
  /** null: closed. */
  move: { number: number; to: CaseState } | null;
  fault: string | null;
  busy: boolean;
  onMove: (note: string) => void;
  onClose: () => void;
}

/** What was done, before a case is closed. */
export function MoveDialog({ move, fault, busy, onMove, onClose }: Props) {
  const done = move?.to === 'done';
  return (
    <Dialog
      open={move !== null}
      title={move ? `Close case ${move.number}: ${CASE_STATE_WORDS[move.to].toLowerCase()}` : ''}
      onClose={onClose}
    >
      {move && <MoveForm key={`${move.number} ${move.to}`} {...{ done, fault, busy, onMove, onClose }} />}
    </Dialog>
  );
}

function MoveForm({ done, fault, busy, onMove, onClose }: Omit<Props, 'move'> & { done: boolean }) {
  const [note, setNote] = useState('');
  return (
    <form
      className="grid gap-4"
      onSubmit={(event) => {
        event.preventDefault();
        onMove(note);
      }}
    >
      <TextArea
        label={done ? 'What was done' : 'What was looked at'}
        value={note}
        onChange={setNote}
        rows={4}
        maxLength={2000}
        error={fault}
      />
      <p className="text-ink-2">
        Wakeline looks again over the following daylight. Where the figures have not come right, it opens the
        case again.
      </p>
      <div className="flex flex-wrap gap-2">
        <Button type="submit" weight="primary" disabled={busy}>
          Close the case
        </Button>
        <Button onClick={onClose}>Leave it open</Button>
      </div>
    </form>
  );
}
