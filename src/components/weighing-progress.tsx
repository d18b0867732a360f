import { useEffect, useState } from 'react';
import { useTranslation } from 'react-i18next';
import { Progress } from './progress.tsx';
import { Skeleton } from './skeleton.tsx';

/** A stored answer comes sooner than this; what takes longer is being computed. */
const computingAfterMs = 700;

/** While an answer is on its way: grey lines at first, then what the server is at. */
export function WeighingProgress({ lines }: { lines: number }) {
  const { t } = useTranslation('common');
  const [isComputing, setComputing] = useState(false);
  useEffect(() => {
    const timer = setTimeout(() => setComputing(true), computingAfterMs);
    return () => clearTimeout(timer);
  }, []);
  return (
    <>
      {isComputing && (
        <div className="mb-4 max-w-prose">
          <Progress label={t('weighing')} />
        </div>
      )}
      <Skeleton lines={lines} />
    </>
  );
}
