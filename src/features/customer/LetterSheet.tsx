import { useState } from 'react';
import { Segmented } from '../../components/ui/Segmented';
import { Sheet } from '../../components/ui/Sheet';
import { ApiError, api } from '../../lib/api';
import type { LetterChoice } from '../../schemas/api/customer';
import { paths } from '../../schemas/paths';
import { letterSheet } from '../../words/customer';

type Shown = 'none' | 'week' | 'month';
const CHOICES = [
  { value: 'none', label: letterSheet.noLetter },
  { value: 'week', label: letterSheet.eachWeek },
  { value: 'month', label: letterSheet.eachMonth },
] as const;
const SAYS: Record<Shown, string> = {
  none: letterSheet.noLetterIsSent,
  week: letterSheet.weeklyComes,
  month: letterSheet.monthlyComes,
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
      setSays(
        error instanceof ApiError ? letterSheet.notChanged(error.message) : letterSheet.notChangedTryAgain,
      );
    }
  };
  return (
    <Sheet id="letter" title={letterSheet.title} className="no-print">
      <Segmented
        label={letterSheet.howOften}
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
