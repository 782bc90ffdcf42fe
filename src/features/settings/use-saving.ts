import { useState } from 'react';
import { ApiError } from '../../lib/api';
import type { OrganisationSettings } from '../../schemas/api/settings';
import { settingsUseSaving } from '../../words/settings';

/** One form of the settings: sends, shows what was wrong at its field, and says when it is kept. */
export function useSaving(onSaved: (settings: OrganisationSettings) => void) {
  const [busy, setBusy] = useState(false);
  const [kept, setKept] = useState(false);
  const [fault, setFault] = useState<ApiError | null>(null);
  const save = async (send: () => Promise<OrganisationSettings>): Promise<void> => {
    setBusy(true);
    setKept(false);
    setFault(null);
    try {
      onSaved(await send());
      setKept(true);
    } catch (error) {
      setFault(
        error instanceof ApiError
          ? error
          : new ApiError(0, settingsUseSaving.notSaved, settingsUseSaving.notSent),
      );
    }
    setBusy(false);
  };
  return { busy, kept, fault, save, error: (field: string) => fault?.fault(field) ?? null };
}
