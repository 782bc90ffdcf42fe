import { Button } from './Button';
import { showMore } from '../../words/ui';

interface Props {
  /** Entries shown, of so many; nothing stands here once all are. */
  shown: number;
  of: number;
  /** What they are: "sites". */
  what: string;
  onMore: () => void;
}

/** Under a list that begins with its first entries. */
export function ShowMore({ shown, of, what, onMore }: Props) {
  if (shown >= of) return null;
  return (
    <p className="no-print mt-3">
      <Button onClick={onMore}>{showMore.showMoreOfShown(what, shown, of)}</Button>
    </p>
  );
}
