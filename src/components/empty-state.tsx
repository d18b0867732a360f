import type { ReactNode } from 'react';

type EmptyStateProps = { title: ReactNode; children?: ReactNode; action?: ReactNode };

/** A list with nothing in it: says so, why, and the next step. */
export function EmptyState({ title, children, action }: EmptyStateProps) {
  return (
    <div className="rounded-lg border border-dashed border-edge px-5 py-8 text-center">
      <p className="text-lg font-semibold">{title}</p>
      {children && <div className="mx-auto mt-2 max-w-prose text-faded">{children}</div>}
      {action && <div className="mt-4">{action}</div>}
    </div>
  );
}
