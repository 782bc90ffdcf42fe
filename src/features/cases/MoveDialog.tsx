import { useState } from 'react';
import { Button } from '../../components/ui/Button';
import { Dialog } from '../../components/ui/Dialog';
import { type CaseState } from '../../domain/cases/cases';
import { CASE_STATE_WORDS } from '../../words/domain-cases';
import { TextArea } from './TextArea';
import { moveDialog } from '../../words/cases';

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
      title={move ? moveDialog.closeCase(move.number, CASE_STATE_WORDS[move.to]) : ''}
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
        label={done ? moveDialog.whatWasDone : moveDialog.whatWasLookedAt}
        value={note}
        onChange={setNote}
        rows={4}
        maxLength={2000}
        error={fault}
      />
      <p className="text-ink-2">{moveDialog.wakelineLooksAgainOver}</p>
      <div className="flex flex-wrap gap-2">
        <Button type="submit" weight="primary" disabled={busy}>
          {moveDialog.closeTheCase}
        </Button>
        <Button onClick={onClose}>{moveDialog.leaveItOpen}</Button>
      </div>
    </form>
  );
}
