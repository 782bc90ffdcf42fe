import { useRef, useState, type KeyboardEvent } from 'react';
import { Tag } from '../../components/ui/Tag';
import { CASE_STATES, type CaseState } from '../../domain/cases/cases';
import { CASE_KIND_WORDS, CASE_STATE_WORDS, CHECK_OUTCOME_WORDS } from '../../words/domain-cases';
import type { CaseItem } from '../../schemas/api/cases';
import { paths } from '../../schemas/paths';
import { dueWords, OUTCOME_TONE, STATE_MEANS } from './words';
import { caseBoardBoard } from '../../words/case-board';

interface Props {
  cases: readonly CaseItem[];
  onMove: (item: CaseItem, to: CaseState) => void;
}

/**
 * Cases by state. A card is moved by dragging it, by its own choice of states, or with [ and ] while it has the focus;
 * arrows go from card to card.
 */
export function Board({ cases, onMove }: Props) {
  const [over, setOver] = useState<CaseState | null>(null);
  const board = useRef<HTMLDivElement>(null);
  const dragged = useRef<CaseItem | null>(null);

  const focusCard = (column: number, row: number) => {
    const cards = board.current
      ?.querySelectorAll(`[data-column="${column}"]`)[0]
      ?.querySelectorAll<HTMLElement>('[data-card]');
    const card = cards && cards[Math.min(cards.length - 1, Math.max(0, row))];
    card?.focus();
    return card !== undefined;
  };
  const onKey = (event: KeyboardEvent, item: CaseItem, column: number, row: number) => {
    if (event.target instanceof HTMLSelectElement) return;
    const step = { '[': -1, ']': 1 }[event.key];
    const next = step === undefined ? undefined : CASE_STATES[column + step];
    if (next) onMove(item, next);
    else if (event.key === 'ArrowDown') focusCard(column, row + 1);
    else if (event.key === 'ArrowUp') focusCard(column, row - 1);
    else if (event.key === 'ArrowRight' || event.key === 'ArrowLeft') {
      const way = event.key === 'ArrowRight' ? 1 : -1;
      for (let c = column + way; c >= 0 && c < CASE_STATES.length; c += way) if (focusCard(c, row)) break;
    } else return;
    event.preventDefault();
  };

  return (
    <div ref={board} className="grid items-start gap-x-4 gap-y-6 md:grid-cols-2 xl:grid-cols-4">
      {CASE_STATES.map((state, column) => {
        const cards = cases.filter((c) => c.state === state);
        return (
          <section
            key={state}
            data-column={column}
            aria-labelledby={`column-${state}`}
            className={`min-w-0 border-b border-t-2 border-b-rule border-t-ink px-3 py-3 md:min-h-[320px] ${over === state ? 'bg-petrol-wash' : 'bg-sheet'}`}
            onDragOver={(event) => {
              event.preventDefault();
              setOver(state);
            }}
            onDragLeave={(event) => {
              if (!event.currentTarget.contains(event.relatedTarget as Node | null)) setOver(null);
            }}
            onDrop={(event) => {
              event.preventDefault();
              setOver(null);
              const item = dragged.current;
              dragged.current = null;
              if (item && item.state !== state) onMove(item, state);
            }}
          >
            <div className="mb-2">
              <h2 id={`column-${state}`} className="text-[15px] leading-5 tracking-[-0.01em]">
                {CASE_STATE_WORDS[state]} <span className="font-normal text-ink-2">{cards.length}</span>
              </h2>
              <p className="text-sm text-ink-2">{STATE_MEANS[state]}</p>
            </div>
            <ul className="space-y-2">
              {cards.map((item, row) => (
                <li
                  key={item.id}
                  draggable
                  onDragStart={(event) => {
                    dragged.current = item;
                    event.dataTransfer.effectAllowed = 'move';
                    event.dataTransfer.setData('text/plain', caseBoardBoard.caseItem(item.number));
                  }}
                  onDragEnd={() => {
                    dragged.current = null;
                    setOver(null);
                  }}
                  onKeyDown={(event) => onKey(event, item, column, row)}
                  className="cursor-grab border border-rule bg-sheet px-3 py-2.5 active:cursor-grabbing"
                >
                  <Card item={item} onMove={onMove} />
                </li>
              ))}
            </ul>
            {cards.length === 0 && (
              <p className="border border-dashed border-rule px-3 py-3 text-sm text-ink-2">
                {caseBoardBoard.nothingHere}
              </p>
            )}
          </section>
        );
      })}
    </div>
  );
}

function Card({ item, onMove }: { item: CaseItem; onMove: Props['onMove'] }) {
  const due = dueWords(item);
  const where = [item.siteName, item.strings.length > 0 ? item.strings.map((s) => s.name).join(', ') : '']
    .filter(Boolean)
    .join(' · ');
  return (
    <>
      <a
        data-card
        href={paths.caseFile(item.id)}
        draggable={false}
        className="block py-0.5 font-medium leading-5 [overflow-wrap:anywhere] hover:underline"
      >
        <span className="text-ink-2">#{item.number}</span> {item.title}
      </a>
      <p className="mt-0.5 text-sm text-ink-2 [overflow-wrap:anywhere]">{where}</p>
      <p className="mt-1.5 flex flex-wrap gap-1.5">
        {item.kind !== 'other' && (
          <Tag tone={item.kind === 'not_shutting_down' ? 'crimson' : 'plain'}>
            {CASE_KIND_WORDS[item.kind]}
          </Tag>
        )}
        {due && <Tag tone={item.overdue ? 'rust' : 'plain'}>{due}</Tag>}
        {item.outcome && <Tag tone={OUTCOME_TONE[item.outcome]}>{CHECK_OUTCOME_WORDS[item.outcome]}</Tag>}
      </p>
      <div className="mt-2 flex items-center justify-between gap-2">
        <span className="min-w-0 truncate text-sm text-ink-2">
          {item.assignee?.name ?? caseBoardBoard.nobodyYet}
        </span>
        <select
          aria-label={caseBoardBoard.moveCaseTo(item.number)}
          value={item.state}
          onChange={(event) => {
            const to = CASE_STATES.find((s) => s === event.target.value);
            if (to && to !== item.state) onMove(item, to);
          }}
          className="target max-w-[140px] shrink-0 rounded border border-rule bg-sheet px-2 text-sm text-ink"
        >
          {CASE_STATES.map((s) => (
            <option key={s} value={s}>
              {CASE_STATE_WORDS[s]}
            </option>
          ))}
        </select>
      </div>
    </>
  );
}
