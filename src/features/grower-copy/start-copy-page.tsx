import '@vitejs/plugin-react/preamble';
import { hydrateRoot } from 'react-dom/client';
import { I18nextProvider } from 'react-i18next';
import { answerId } from '#shared/page-exchange.ts';
import { ReaderUnitsProvider } from '#src/components/reader-units-context.tsx';
import { openAllSentences } from '#src/open-all-sentences.ts';
import { CopyAnswer } from './copy-answer.tsx';
import type { CopyScriptData } from './copy-script-data.ts';
import { carryOwnNumbers } from './own-numbers-fragment.ts';

const firstWaitMs = 1000;
const longestWaitMs = 60_000;

/** Signal comes and goes on a field: what this page needs is asked for until the server says that there is none. */
async function fetchScriptData(): Promise<CopyScriptData> {
  for (let wait = firstWaitMs; ; wait = Math.min(2 * wait, longestWaitMs)) {
    const reply = await fetch(`${location.pathname}/answer${location.search}`).catch(() => null);
    // Written by the server that sent this script.
    if (reply?.ok === true) return (await reply.json()) as CopyScriptData;
    if (reply !== null && reply.status < 500) throw new Error(`the answer is refused with ${reply.status}`);
    await new Promise((resolve) => setTimeout(resolve, wait));
  }
}

const answer = document.getElementById(answerId);
if (answer === null) throw new Error('The page of the copy is not whole');
const { language, units, sentences, answer: props } = await fetchScriptData();
hydrateRoot(
  answer,
  <I18nextProvider i18n={openAllSentences(language, sentences)}>
    <ReaderUnitsProvider units={units}>
      <CopyAnswer {...props} />
    </ReaderUnitsProvider>
  </I18nextProvider>,
);

for (const link of document.querySelectorAll<HTMLAnchorElement>('a[data-carries-price]')) {
  link.addEventListener('click', () => carryOwnNumbers(link));
}
