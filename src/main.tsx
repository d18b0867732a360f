import { StrictMode } from 'react';
import { createRoot } from 'react-dom/client';
import { QueryClientProvider } from '@tanstack/react-query';
import { BrowserRouter } from 'react-router-dom';
import { awaitFirstAnswers } from './first-answers.ts';
import { expectFirstPaint } from './first-paint.ts';
import { startI18n } from './i18n.ts';
import { openDetailsOnPaper } from './open-details-on-paper.ts';
import { keepScrollPlace } from './keep-scroll-place.ts';
import { makeQueryClient } from './query-client.ts';
import { AppRoutes, preparePage } from './routes.tsx';
import './app.css';

const root = document.getElementById('root');
if (!root) throw new Error('index.html has no #root');

// Nothing is painted until the page is there: with what the server has named in the document it comes in the same round.
const started = startI18n();
await Promise.all([started, preparePage(window.location.pathname, started), awaitFirstAnswers()]);
openDetailsOnPaper();
keepScrollPlace();
expectFirstPaint();

createRoot(root).render(
  <StrictMode>
    <QueryClientProvider client={makeQueryClient()}>
      {/* The address holds what is chosen and typed: in a transition such a control would lag behind the finger. */}
      <BrowserRouter useTransitions={false}>
        <AppRoutes />
      </BrowserRouter>
    </QueryClientProvider>
  </StrictMode>,
);
