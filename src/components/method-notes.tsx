import { useTranslation } from 'react-i18next';
import { tellMethod } from '#shared/method-sentences.ts';
import type { WeighUpResult } from '#shared/weigh-up.ts';
import { useFormat } from './use-format.ts';

type MethodNotesProps = { result: WeighUpResult };

/** How the figures were made, in sentences, with what they rest on. */
export function MethodNotes({ result }: MethodNotesProps) {
  const { t } = useTranslation(['method', 'verdicts', 'common']);
  const format = useFormat();
  return (
    <div className="flex max-w-prose flex-col gap-2 print:gap-0.5">
      {tellMethod(result, t, format).map(({ kind, text, items }) => (
        <div key={text} className={kind === 'mark' ? 'text-sm text-faded' : undefined}>
          <p>{text}</p>
          {items.length > 0 && (
            <ul className="list-disc pl-5">
              {items.map((item) => (
                <li key={item}>{item}</li>
              ))}
            </ul>
          )}
        </div>
      ))}
    </div>
  );
}
