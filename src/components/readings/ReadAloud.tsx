import { useEffect, useState, useSyncExternalStore } from 'react';
import { Button } from '../ui/Button';
import { readAloud } from '../../words/shared-readings';
import { LOCALE } from '../../words/language';

/** What the device can do does not change; the server has neither. */
const never = () => () => undefined;
const cannot = () => false;
const canSpeak = () => 'speechSynthesis' in window;
const canCopy = () => 'clipboard' in navigator;

interface Props {
  text: string;
  /** Whether the address says all that is on the page, so that it is worth copying. */
  link?: boolean;
}

/** Reads the answer and its cautions, where the device has a voice; copies the address, where it may. */
export function ReadAloud({ text, link = true }: Props) {
  const speaks = useSyncExternalStore(never, canSpeak, cannot);
  const copies = useSyncExternalStore(never, canCopy, cannot) && link;
  const [speaking, setSpeaking] = useState(false);
  const [note, setNote] = useState('');
  useEffect(
    () => () => {
      if ('speechSynthesis' in window) window.speechSynthesis.cancel();
    },
    [text],
  );
  if (!speaks && !copies) return null;

  const speak = () => {
    window.speechSynthesis.cancel();
    if (speaking) {
      setSpeaking(false);
      return;
    }
    const words = new SpeechSynthesisUtterance(text);
    words.lang = LOCALE;
    words.onend = () => setSpeaking(false);
    words.onerror = () => {
      setSpeaking(false);
      setNote(readAloud.thisDeviceHasNo);
    };
    setNote('');
    setSpeaking(true);
    window.speechSynthesis.speak(words);
  };
  const copy = () => {
    navigator.clipboard.writeText(window.location.href).then(
      () => setNote(readAloud.theLinkIsCopied),
      () => setNote(readAloud.theBrowserDoesNot),
    );
  };
  return (
    <div className="no-print flex flex-wrap items-center gap-2">
      {speaks && (
        <Button onClick={speak} aria-pressed={speaking} className="min-h-[44px] flex-1 sm:flex-none">
          {speaking ? readAloud.stopReading : readAloud.readItAloud}
        </Button>
      )}
      {copies && (
        <Button onClick={copy} className="min-h-[44px] flex-1 sm:flex-none">
          {readAloud.copyTheLink}
        </Button>
      )}
      <p role="status" className="text-sm text-ink-2">
        {note}
      </p>
    </div>
  );
}
