import type { ReactNode } from 'react';
import type { Trait } from '#shared/catalogue.ts';
import type { CandidateResult } from '#shared/weigh-up.ts';

type TraitCardsProps = {
  traits: readonly Trait[];
  candidates: readonly CandidateResult[];
  nameOf: (trait: Trait) => ReactNode;
  cellOf: (candidate: CandidateResult, trait: Trait) => ReactNode;
};

/** Traits under each other, each with its candidates as far side by side as there is room: for more than a table can hold. */
export function TraitCards({ traits, candidates, nameOf, cellOf }: TraitCardsProps) {
  return (
    <div className="border-t-2 border-ink">
      {traits.map((trait) => (
        <section key={trait.id} className="border-b border-rule py-3 print:break-inside-avoid print:py-1">
          <h3 className="mb-2 text-base print:mb-0.5">{nameOf(trait)}</h3>
          <dl className="grid grid-cols-[repeat(auto-fill,minmax(9.5rem,1fr))] gap-x-4 gap-y-3 print:gap-y-0.5">
            {candidates.map((candidate) => (
              <div key={candidate.varietyId}>
                <dt className="text-sm text-faded">{candidate.varietyName}</dt>
                <dd>{cellOf(candidate, trait)}</dd>
              </div>
            ))}
          </dl>
        </section>
      ))}
    </div>
  );
}
