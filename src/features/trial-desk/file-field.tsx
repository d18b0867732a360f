import { useTranslation } from 'react-i18next';
import { importByteLimit, importRowLimit } from '#shared/trial-desk.ts';
import { Field } from '#src/components/field.tsx';
import { TextInput } from '#src/components/text-input.tsx';

const megabyte = 1024 * 1024;

type FileFieldProps = { file: File | null; isMissing: boolean; onFile: (file: File | null) => void };

/** Takes one file; one that the server would refuse for its size is refused here already. */
export function FileField({ file, isMissing, onFile }: FileFieldProps) {
  const { t } = useTranslation('desk');
  const megabytes = importByteLimit / megabyte;
  const isTooLarge = file !== null && file.size > importByteLimit;
  const error = isMissing
    ? t('importPage.fileNeeded')
    : isTooLarge
      ? t('importPage.fileTooLarge', { megabytes })
      : undefined;
  return (
    <Field
      label={t('importPage.file')}
      hint={t('importPage.fileHint', { rows: importRowLimit, megabytes })}
      error={error}
      isRequired
      className="max-w-xl"
    >
      <TextInput
        type="file"
        accept=".csv,.txt,text/csv,text/plain"
        onChange={(event) => onFile(event.target.files?.[0] ?? null)}
      />
    </Field>
  );
}
