import type { ReactNode } from 'react';

export type Fact = { id: string; label: ReactNode; value: ReactNode };

/** Facts in one line, each with its name above it; they wrap in twos on a phone. */
export function FactRow({ facts }: { facts: readonly Fact[] }) {
  return (
    <dl className="grid grid-cols-2 gap-x-6 gap-y-3 border-y border-rule py-3 sm:flex sm:flex-wrap sm:gap-x-9">
      {facts.map((fact) => (
        <div key={fact.id} className="flex flex-col">
          <dt className="text-sm text-faded">{fact.label}</dt>
          <dd className="text-lg font-semibold">{fact.value}</dd>
        </div>
      ))}
    </dl>
  );
}
