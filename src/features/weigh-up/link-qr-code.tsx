import { useQuery } from '@tanstack/react-query';
import { useTranslation } from 'react-i18next';

/** Empty modules around the code, without which cameras do not find it (ISO/IEC 18004). */
const quietZone = 4;

/** The dark modules of a code as one path, row by row, and its side in modules with the quiet zone. */
async function drawCode(link: string): Promise<{ path: string; side: number }> {
  // Fetched only when a link is shown: most visits hand nothing over.
  const { create } = await import('qrcode');
  const { modules } = create(link, { errorCorrectionLevel: 'M' });
  const parts: string[] = [];
  for (let row = 0; row < modules.size; row += 1)
    for (let column = 0; column < modules.size; column += 1)
      if (modules.get(row, column)) parts.push(`M${column + quietZone} ${row + quietZone}h1v1h-1z`);
  return { path: parts.join(''), side: modules.size + 2 * quietZone };
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
