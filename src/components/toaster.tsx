import { useEffect, useState, useSyncExternalStore } from 'react';
import { useTranslation } from 'react-i18next';

type Toast = { id: number; text: string; onUndo?: () => void };

let toast: Toast | null = null;
let count = 0;
const listeners = new Set<() => void>();

function setToast(next: Toast | null): void {
  toast = next;
  listeners.forEach((listener) => listener());
}

/**
 * Says at the foot of the page what was just done. With a way to undo it, it stays until it is closed; without one it goes
 * by itself, since on a phone it stands over the foot of the page.
 */
export function showToast(text: string, onUndo?: () => void): void {
  count += 1;
  setToast({ id: count, text, ...(onUndo && { onUndo }) });
}

function subscribe(listener: () => void): () => void {
  listeners.add(listener);
  return () => listeners.delete(listener);
}

/** Long enough to read two lines twice. */
const shownMs = 8000;

/** The place where toasts appear; stands once, in the shell. */
export function Toaster() {
  const { t } = useTranslation('common');
  const shown = useSyncExternalStore(
    subscribe,
    () => toast,
    () => null,
  );
  // Whoever is on it, by pointer or by key, is still reading.
  const [isHeld, setHeld] = useState(false);
  useEffect(() => {
    if (shown === null || shown.onUndo || isHeld) return undefined;
    const timer = setTimeout(() => setToast(null), shownMs);
    return () => clearTimeout(timer);
  }, [shown, isHeld]);
  const close = () => {
    setHeld(false);
    setToast(null);
  };
  const undo = () => {
    shown?.onUndo?.();
    close();
  };
  const step = 'tap-target px-2 font-semibold underline underline-offset-4';
  return (
    <div
      role="status"
      className="pointer-events-none fixed inset-x-0 bottom-0 z-20 flex justify-center p-3 print:hidden"
    >
      {shown && (
        <div
          key={shown.id}
          onMouseEnter={() => setHeld(true)}
          onMouseLeave={() => setHeld(false)}
          onFocus={() => setHeld(true)}
          onBlur={() => setHeld(false)}
          className="pointer-events-auto flex flex-wrap items-center gap-x-3 rounded-lg bg-ink px-4 py-1 text-paper"
        >
          <span>{shown.text}</span>
          {shown.onUndo && (
            <button type="button" onClick={undo} className={step}>
              {t('undo')}
            </button>
          )}
          <button type="button" onClick={close} className={step}>
            {t('close')}
          </button>
        </div>
      )}
    </div>
  );
}
