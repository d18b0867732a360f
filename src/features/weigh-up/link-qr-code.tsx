import { useQuery } from '@tanstack/react-query';
import { useTranslation } from 'react-i18next';
import { drawCodePath } from '#shared/qr-code-path.ts';

async function drawCode(link: string): Promise<{ path: string; side: number }> {
  // Fetched only when a link is shown: most visits hand nothing over.
  const { create } = await import('qrcode');
  return drawCodePath(create(link, { errorCorrectionLevel: 'M' }).modules);
}

/** The link for a phone's camera. Black on white whatever the page's colours, so that it is read and prints. */
export function LinkQrCode({ link }: { link: string }) {
  const { t } = useTranslation('weigh-up');
  const code = useQuery({
    queryKey: ['qr-code', link],
    queryFn: () => drawCode(link),
    staleTime: Infinity,
    // The link is a secret: it does not stay in memory after its card.
    gcTime: 0,
  });
  return (
    <figure className="m-0 flex w-44 flex-col gap-1">
      <svg
        role="img"
        aria-label={t('copies.qrTitle')}
        viewBox={code.data === undefined ? '0 0 1 1' : `0 0 ${code.data.side} ${code.data.side}`}
        shapeRendering="crispEdges"
        className="aspect-square w-full border border-rule bg-white [print-color-adjust:exact]"
      >
        {code.data && <path d={code.data.path} fill="#000" />}
      </svg>
      <figcaption className="text-sm text-faded print:hidden">{t('copies.qrHint')}</figcaption>
    </figure>
  );
}
