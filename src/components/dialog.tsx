import { useEffect, useId, useRef, type ReactNode } from 'react';
import { useTranslation } from 'react-i18next';

type DialogProps = {
  isOpen: boolean;
  title: ReactNode;
  /** Called by Escape, by the close button and by the browser's back gesture. */
  onClose: () => void;
  children: ReactNode;
};

/** The browser's own modal dialog: it keeps focus inside and gives it back on closing. */
export function Dialog({ isOpen, title, onClose, children }: DialogProps) {
  const { t } = useTranslation('common');
  const titleId = useId();
  const ref = useRef<HTMLDialogElement>(null);
  useEffect(() => {
    const dialog = ref.current;
    if (!dialog) return;
    if (isOpen && !dialog.open) dialog.showModal();
    if (!isOpen && dialog.open) dialog.close();
  }, [isOpen]);
  return (
    // It may stand in a cell of a table, whose alignment is not its own.
    <dialog
      ref={ref}
      aria-labelledby={titleId}
      onCancel={(event) => {
        // The owner decides: it closes by setting isOpen to false.
        event.preventDefault();
        onClose();
      }}
      className="m-auto w-[min(34rem,calc(100vw-1.5rem))] rounded-lg border border-rule bg-paper p-5 text-left font-normal whitespace-normal text-ink"
    >
      {isOpen && (
        <>
          <div className="mb-3 flex items-start justify-between gap-3">
            <h2 id={titleId} className="pt-2">
              {title}
            </h2>
            <button
              type="button"
              onClick={onClose}
              aria-label={t('close')}
              className="tap-target text-lg text-faded"
            >
              <span aria-hidden="true">✕</span>
            </button>
          </div>
          {children}
        </>
      )}
    </dialog>
  );
}

/** The steps at the foot of a dialog or form: the main one last, stacked on a phone. */
export function Actions({ children }: { children: ReactNode }) {
  return <div className="mt-5 flex flex-col-reverse gap-3 sm:flex-row sm:justify-end">{children}</div>;
}
