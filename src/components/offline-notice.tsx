import { useSyncExternalStore } from 'react';
import { useTranslation } from 'react-i18next';

function subscribe(onChange: () => void): () => void {
  window.addEventListener('online', onChange);
  window.addEventListener('offline', onChange);
  return () => {
    window.removeEventListener('online', onChange);
    window.removeEventListener('offline', onChange);
  };
}

/** Says so while the device has no network: what is on the page stays readable, changes cannot be kept. */
export function OfflineNotice() {
  const { t } = useTranslation('common');
  const isOnline = useSyncExternalStore(
    subscribe,
    () => navigator.onLine,
    // On the server: whoever is sent a page has a network.
    () => true,
  );
  return (
    <div role="status" className="print:hidden">
      {!isOnline && <p className="bg-warning px-4 py-2 text-center text-sm md:px-8">{t('offlineNotice')}</p>}
    </div>
  );
}
