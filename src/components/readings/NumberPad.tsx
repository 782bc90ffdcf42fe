import { numberPad } from '../../words/shared-readings';
const DIGITS = ['1', '2', '3', '4', '5', '6', '7', '8', '9'] as const;
const KEY = 'min-h-[48px] rounded border border-rule bg-sheet text-[20px] font-medium active:bg-petrol-wash';

interface Props {
  onKey: (key: string) => void;
  doneWords?: string;
  onDone: () => void;
}

/** Numbers under one thumb; hidden where there is a keyboard. */
export function NumberPad({ onKey, doneWords = numberPad.done, onDone }: Props) {
  return (
    <div
      role="group"
      aria-label={numberPad.numberPad}
      data-pad
      className="grid grid-cols-4 gap-1.5 pt-1 lg:hidden"
    >
      {DIGITS.map((digit, i) => (
        <button
          key={digit}
          type="button"
          className={KEY}
          style={{ gridColumn: (i % 3) + 1, gridRow: Math.floor(i / 3) + 1 }}
          onClick={() => onKey(digit)}
        >
          {digit}
        </button>
      ))}
      <button
        type="button"
        className={KEY}
        style={{ gridColumn: 1, gridRow: 4 }}
        onClick={() => onKey('.')}
        aria-label={numberPad.decimalPoint}
      >
        .
      </button>
      <button
        type="button"
        className={KEY}
        style={{ gridColumn: '2 / 4', gridRow: 4 }}
        onClick={() => onKey('0')}
      >
        0
      </button>
      <button
        type="button"
        className={KEY}
        style={{ gridColumn: 4, gridRow: 1 }}
        onClick={() => onKey('back')}
        aria-label={numberPad.deleteTheLastDigit}
      >
        ⌫
      </button>
      <button
        type="button"
        className={`${KEY} !text-[15px]`}
        style={{ gridColumn: 4, gridRow: '2 / 4' }}
        onClick={() => onKey('clear')}
      >
        {numberPad.clear}
      </button>
      <button
        type="button"
        className={`${KEY} !border-ink !bg-ink !text-[15px] text-sheet`}
        style={{ gridColumn: 4, gridRow: 4 }}
        onClick={onDone}
      >
        {doneWords}
      </button>
    </div>
  );
}
