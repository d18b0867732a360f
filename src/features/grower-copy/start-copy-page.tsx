import '@vitejs/plugin-react/preamble';
import { hydrateRoot } from 'react-dom/client';
import { I18nextProvider } from 'react-i18next';
import { ReaderUnitsProvider } from '#src/components/reader-units-context.tsx';
import { CopyAnswer } from './copy-answer.tsx';
import { answerId, dataId, type CopyScriptData } from './copy-script-data.ts';
import { openCopySentences } from './open-copy-sentences.ts';
import { carryOwnPrice } from './own-price-fragment.ts';

const answer = document.getElementById(answerId);
const data = document.getElementById(dataId)?.textContent;
if (answer === null || data === undefined) throw new Error('The page of the copy is not whole');

// Written by the page that brought this script.
const { language, units, sentences, answer: props } = JSON.parse(data) as CopyScriptData;
hydrateRoot(
  answer,
  <I18nextProvider i18n={openCopySentences(language, sentences)}>
    <ReaderUnitsProvider units={units}>
      <CopyAnswer {...props} />
    </ReaderUnitsProvider>
  </I18nextProvider>,
);

for (const link of document.querySelectorAll<HTMLAnchorElement>('a[data-carries-price]')) {
  link.addEventListener('click', () => carryOwnPrice(link));
}
