import { useId, useState, type ReactNode } from 'react';
import { useTranslation } from 'react-i18next';

type DrawingFrameProps = {
  /** Says in words what the drawing shows. */
  title: ReactNode;
  /** One picture with one sentence (`role="img"`): a screen reader then gets the table right after it. */
  isPicture?: boolean;
  drawing: ReactNode;
  /** The same figures as a table, without controls in it. */
  table: ReactNode;
  /** Keys and remarks under both. */
  footer?: ReactNode;
  className?: string;
};

/** A drawing with its table twin: one is shown, the other a press away; a screen reader always has the figures. */
export function DrawingFrame({
  title,
  isPicture = false,
  drawing,
  table,
  footer,
  className = '',
}: DrawingFrameProps) {
  const { t } = useTranslation('common');
  const titleId = useId();
  const [isTable, setTable] = useState(false);
  return (
    <figure aria-labelledby={titleId} className={className}>
      <figcaption className="mb-2 flex flex-wrap items-center justify-between gap-x-4">
        <span id={titleId} className="font-semibold">
          {title}
        </span>
        <button
          type="button"
          onClick={() => setTable(!isTable)}
          className="tap-target text-sm text-action underline underline-offset-4 hover:decoration-2 print:hidden"
        >
          {isTable ? t('drawing.showDrawing') : t('drawing.showTable')}
        </button>
      </figcaption>
      {isTable ? table : drawing}
      {!isTable && isPicture && <div className="sr-only">{table}</div>}
      {footer}
    </figure>
  );
}
