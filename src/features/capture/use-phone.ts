import { useEffect, useState, useSyncExternalStore } from 'react';
import type { CaptureSnapshot } from '../../schemas/api/capture';
import { CapturePhone, EMPTY_PHONE, type PhoneState } from '../../lib/capture-phone';

const never = () => () => undefined;

/** The phone of this page: null until the browser has it. The first paint is drawn from `initial` alone. */
export function usePhone(
  site: string | null,
  initial: CaptureSnapshot | null,
): { phone: CapturePhone | null; state: PhoneState } {
  const [phone, setPhone] = useState<CapturePhone | null>(null);
  useEffect(() => {
    const made = new CapturePhone(site, initial);
    setPhone(made); // the browser’s stores exist from here on
    return () => made.stop();
  }, [site, initial]);
  const [first] = useState<PhoneState>(() => ({
    ...EMPTY_PHONE,
    snapshot: initial,
    here: initial && { person: initial.person.id, name: initial.person.name },
  }));
  const state = useSyncExternalStore(phone?.subscribe ?? never, phone?.current ?? (() => first), () => first);
  return { phone, state };
}
