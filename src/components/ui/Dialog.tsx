import { useEffect, useRef, type ReactNode } from 'react';
import { uiDialog } from '../../words/ui';

interface Props {
  open: boolean;
  title: string;
  onClose: () => void;
  children: ReactNode;
}

/** A modal dialog: the browser's own, so focus stays in it and Escape closes it. */
export function Dialog({ open, title, onClose, children }: Props) {
  const ref = useRef<HTMLDialogElement>(null);
  useEffect(() => {
    const dialog = ref.current;
    if (!dialog) return;
    if (open && !dialog.open) dialog.showModal();
    if (!open && dialog.open) dialog.close();
  }, [open]);
  return (
    <dialog
      ref={ref}
      aria-label={title}
      onClose={onClose}
      className="w-[min(560px,calc(100vw-24px))] border-b border-t-2 border-b-rule border-t-ink bg-sheet p-5 text-ink backdrop:bg-[#0009]"
    >
      {open && (
        <>
          <div className="mb-3 flex items-start justify-between gap-4">
            <h2 className="text-lg">{title}</h2>
            <button
              type="button"
              onClick={onClose}
              className="target -mr-3 -mt-2 min-w-[44px] text-2xl leading-none text-ink-2 hover:text-ink"
              aria-label={uiDialog.close}
            >
              ×
            </button>
          </div>
          {children}
        </>
      )}
    </dialog>
  );
}
