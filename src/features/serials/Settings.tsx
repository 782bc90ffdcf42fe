import { useCallback, useEffect, useState } from 'react';
import { serialsSettings } from '../../words/serials';

export interface SettingsValue {
  /** Save what the camera reads without a tap. */
  atOnce: boolean;
  beep: boolean;
  tremble: boolean;
}
const OFF: SettingsValue = { atOnce: false, beep: false, tremble: false };
const SHELF = 'wakeline:serials:settings';

function readSettings(): SettingsValue {
  try {
    const kept: unknown = JSON.parse(localStorage.getItem(SHELF) ?? 'null');
    if (typeof kept !== 'object' || kept === null) return OFF;
    const on = (key: keyof SettingsValue) => (kept as Record<string, unknown>)[key] === true;
    return { atOnce: on('atOnce'), beep: on('beep'), tremble: on('tremble') };
  } catch {
    return OFF; // nothing that is readable: as if never set
  }
}

/** How this phone behaves; all of it is off until somebody wants it. */
export function useSettings(): [SettingsValue, (value: SettingsValue) => void] {
  const [value, setValue] = useState(OFF);
  useEffect(() => {
    // after the first paint, which the server has made without knowing the phone
    const timer = setTimeout(() => setValue(readSettings()), 0);
    return () => clearTimeout(timer);
  }, []);
  const change = useCallback((next: SettingsValue) => {
    setValue(next);
    localStorage.setItem(SHELF, JSON.stringify(next));
  }, []);
  return [value, change];
}

const LABELS: [keyof SettingsValue, string][] = [
  ['atOnce', serialsSettings.saveAtOnceWhat],
  ['beep', serialsSettings.beepWhenASerial],
  ['tremble', serialsSettings.trembleWhenASerial],
];

export function Settings({
  settings,
  onChange,
}: {
  settings: SettingsValue;
  onChange: (value: SettingsValue) => void;
}) {
  return (
    <details className="border-t border-rule">
      <summary className="target flex cursor-pointer items-center py-2 text-[15px] text-ink-2">
        {serialsSettings.howThisPhoneBehaves}
      </summary>
      {LABELS.map(([key, label]) => (
        <label key={key} className="flex min-h-[44px] items-center gap-3 text-[15px]">
          <input
            type="checkbox"
            className="h-5 w-5"
            checked={settings[key]}
            onChange={(event) => onChange({ ...settings, [key]: event.target.checked })}
          />
          {label}
        </label>
      ))}
    </details>
  );
}
