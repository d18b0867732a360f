import type { ReactNode } from 'react';
import type { Queries } from '@testing-library/dom';
import { render, type RenderResult } from '@testing-library/react';
import { QueryClientProvider } from '@tanstack/react-query';
import { MemoryRouter } from 'react-router-dom';
import type { Language } from '#shared/account.ts';
import { changeLanguage, i18n } from '#src/i18n.ts';
import type { Namespace } from '#src/locale-resources.ts';
import { makeQueryClient } from '#src/query-client.ts';

/** Renders a part of the client with its real sentences, in the language asked for. */
export async function renderClient(
  part: ReactNode,
  options: { language?: Language; namespaces?: Namespace[]; at?: string } = {},
): Promise<RenderResult<Queries>> {
  await changeLanguage(options.language ?? 'en');
  await i18n.loadNamespaces(options.namespaces ?? ['drawings']);
  const queryClient = makeQueryClient();
  const at = options.at ?? '/';
  return render(part, {
    wrapper: ({ children }) => (
      <QueryClientProvider client={queryClient}>
        <MemoryRouter initialEntries={[at]}>{children}</MemoryRouter>
      </QueryClientProvider>
    ),
  });
}
