import { Suspense, useRef, type ReactNode } from 'react';
import { useNear } from '../../components/charts/near';
import { whenNear } from '../../words/strings';

interface Props {
  /** px kept free for it; none where mostly there is nothing to show. */
  height?: number;
  children: ReactNode;
}

/** What lies far down the page: its code and its data come when it nears the screen. */
export function WhenNear({ height, children }: Props) {
  const ref = useRef<HTMLDivElement>(null);
  const near = useNear(ref);
  const room = height !== undefined && (
    <div
      style={{ height }}
      className="border-b border-t-2 border-b-rule border-t-ink bg-sheet px-[18px] py-4 text-ink-2"
    >
      {near && <p role="status">{whenNear.loading}</p>}
    </div>
  );
  return (
    <div ref={ref} className={`min-w-0 ${height === undefined ? '-mt-5 has-[section]:mt-0' : ''}`}>
      {near ? <Suspense fallback={room}>{children}</Suspense> : room}
    </div>
  );
}
