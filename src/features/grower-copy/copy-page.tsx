import { useTranslation } from 'react-i18next';
import type { OpenedCopy } from '#shared/grower-copy.ts';
import { CopyBody, useCopyTitle } from './copy-body.tsx';
import { CopyDocument } from './copy-document.tsx';
import type { CopyFailure, CopyPageFiles } from './copy-page-inputs.ts';

type CopyPageProps = {
  copy: OpenedCopy;
  link: string;
  files: CopyPageFiles;
  answerHtml: string | null;
};

/** The page of a copy, whole: it says everything before any script has come. */
export function CopyPage({ copy, link, files, answerHtml }: CopyPageProps) {
  return (
    <CopyDocument title={useCopyTitle(copy)} files={files} hasScript={answerHtml !== null}>
      <CopyBody copy={copy} link={link} answerHtml={answerHtml} />
    </CopyDocument>
  );
}

/** What stands in the place of a copy that a link does not lead to, or that cannot be read at the moment. */
export function FailedCopyPage({ failure, files }: { failure: CopyFailure; files: CopyPageFiles }) {
  const { t } = useTranslation('copy');
  const title = t(`failed.${failure}.title`);
  return (
    <CopyDocument title={title} files={files} hasScript={false}>
      <h1 className="mb-5">{title}</h1>
      <p>{t(`failed.${failure}.text`)}</p>
    </CopyDocument>
  );
}
