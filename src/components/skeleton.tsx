import { useEffect, useState } from 'react';
import { useTranslation } from 'react-i18next';

/** Before this, an empty place is calmer than a flicker. */
const patienceMs = 200;

/** Grey lines while something loads; nothing at all where it comes within 200 ms. */
export function Skeleton({ lines = 4 }: { lines?: number }) {
  const { t } = useTranslation('common');
  const [isShown, setShown] = useState(false);
  useEffect(() => {
    const timer = setTimeout(() => setShown(true), patienceMs);
    return () => clearTimeout(timer);
  }, []);
  return (
    <div role="status" className="min-h-24">
      {isShown && (
        <>
          <span className="text-sm text-faded">{t('loading')}</span>
          {Array.from({ length: lines }, (_, line) => (
            <span
              key={line}
              aria-hidden="true"
              className="mt-3 block h-5 rounded-sm bg-rule/60"
              style={{ width: `${100 - ((line * 17) % 40)}%` }}
            />
          ))}
        </>
      )}
    </div>
  );
}
