import { Sheet } from './Sheet';

/** What one figure says: its name, the figure, and what it means. */
export interface Card {
  label: string;
  figure: string;
  note: string;
}

/** One figure with what it is and what it means. */
export function FigureSheet({ card }: { card: Card }) {
  return (
    <Sheet>
      <h2 className="text-sm font-normal tracking-normal text-ink-2">{card.label}</h2>
      <p className="my-1 text-[26px] font-semibold leading-8 tracking-[-0.02em] sm:text-[30px] sm:leading-9">
        {card.figure}
      </p>
      <p className="text-ink-2">{card.note}</p>
    </Sheet>
  );
}
