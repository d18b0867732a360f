import { create } from 'qrcode';
import { useTranslation } from 'react-i18next';
import { drawCodePath } from '#shared/qr-code-path.ts';

type WayBackProps = {
  /** The whole address of the copy, its secret last. */
  link: string;
};

/** On paper: the copy's address for a phone's camera, at the corner where eyes begin. */
export function CopyCode({ link }: WayBackProps) {
  const { t } = useTranslation('print');
  const { path, side } = drawCodePath(create(link, { errorCorrectionLevel: 'M' }).modules);
  return (
    <svg
      role="img"
      aria-label={t('qrCode')}
      viewBox={`0 0 ${side} ${side}`}
      shapeRendering="crispEdges"
      className="prints-colour absolute top-0 right-0 hidden size-[27mm] bg-white print:block"
    >
      <path d={path} fill="#000" />
    </svg>
  );
}

/** On paper: the same address in writing, for whoever has no camera at hand. */
export function CopyAddress({ link }: WayBackProps) {
  const { t } = useTranslation('print');
  return (
    <p className="hidden print:block">
      {t('onScreen')} <span className="break-all">{link}</span>
    </p>
  );
}
