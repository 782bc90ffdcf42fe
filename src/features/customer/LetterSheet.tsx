import { useState } from 'react';
import { Segmented } from '../../components/ui/Segmented';
import { Sheet } from '../../components/ui/Sheet';
import { ApiError, api } from '../../lib/api';
import type { LetterChoice } from '../../schemas/api/customer';
import { paths } from '../../schemas/paths';

type Shown = 'none' | 'week' | 'month';
const CHOICES = [
  { value: 'none', label: 'No letter' },
  { value: 'week', label: 'Each week' },
  { value: 'month', label: 'Each month' },
] as const;
const SAYS: Record<Shown, string> = {
  none: 'No letter is sent to you about this roof.',
  week: 'A letter comes on Mondays, about the week before.',
  month: 'A letter comes on the first of the month, about the month before.',
};

/** What the roof made, by mail, as often as its owner wants. */
export function LetterSheet({ siteId, initial }: { siteId: string; initial: LetterChoice['every'] }) {
  const [every, setEvery] = useState<Shown>(initial ?? 'none');
  const [says, setSays] = useState<string>(SAYS[initial ?? 'none']);
  const choose = async (wanted: Shown): Promise<void> => {
    const before = every;
    setEvery(wanted);
    try {
      const body: LetterChoice = { every: wanted === 'none' ? null : wanted };
      await api(paths.api.customerLetter(siteId), { method: 'PUT', body });
      setSays(SAYS[wanted]);
    } catch (error) {
      setEvery(before);
      setSays(error instanceof ApiError ? `Not changed: ${error.message}` : 'Not changed. Try again.');
    }
  };
  return (
    <Sheet id="letter" title="A letter about this roof" className="no-print">
      <Segmented
        label="How often"
        name="letter"
        options={CHOICES}
        value={every}
        onChange={(wanted) => void choose(wanted)}
      />
      <p role="status" className="mt-2 text-ink-2">
        {says}
      </p>
    </Sheet>
  );
}
