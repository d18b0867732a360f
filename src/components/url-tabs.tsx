import type { ReactNode } from 'react';
import { Link, useSearchParams } from 'react-router-dom';

export type Tab = { id: string; label: ReactNode };

type UrlTabsProps = {
  /** What the tabs choose between, for screen readers. */
  label: string;
  tabs: readonly Tab[];
  /** Name of the address parameter. */
  param?: string;
};

/** The tab that the address names; the first where it names none or an unknown one. */
export function useUrlTab(tabs: readonly Tab[], param = 'tab'): string {
  const [search] = useSearchParams();
  const asked = search.get(param);
  return tabs.find((tab) => tab.id === asked)?.id ?? tabs[0]?.id ?? '';
}

/** Parts of a page as links, so that each can be reloaded, bookmarked and sent. */
export function UrlTabs({ label, tabs, param = 'tab' }: UrlTabsProps) {
  const [search] = useSearchParams();
  const current = useUrlTab(tabs, param);
  return (
    <nav aria-label={label} className="border-b border-rule print:hidden">
      <ul className="-mb-px flex flex-wrap gap-x-5">
        {tabs.map((tab, index) => {
          const next = new URLSearchParams(search);
          if (index === 0) next.delete(param);
          else next.set(param, tab.id);
          const isCurrent = tab.id === current;
          return (
            <li key={tab.id}>
              <Link
                to={{ search: next.toString() }}
                preventScrollReset
                aria-current={isCurrent ? 'page' : undefined}
                className={`tap-target inline-flex items-center justify-center border-b-3 no-underline hover:underline ${isCurrent ? 'border-ink font-semibold text-ink' : 'border-transparent forced-colors:border-[color:Canvas]'}`}
              >
                {tab.label}
              </Link>
            </li>
          );
        })}
      </ul>
    </nav>
  );
}
