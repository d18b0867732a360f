import { useTranslation } from 'react-i18next';
import type { Trait } from '#shared/catalogue.ts';
import { comparisonMethods, type AnalysisQuery, type ComparisonMethod } from '#shared/trial.ts';
import { Field } from '#src/components/field.tsx';
import { Select } from '#src/components/select.tsx';
import { nameTrait } from '#shared/trait-sentences.ts';
import { useFormat } from '#src/components/use-format.ts';
import { useLanguage } from '#src/components/use-language.ts';
import { readChoice, useUrlPatch } from '#src/url-state.ts';

const alphas = [0.05, 0.1, 0.01] as const;
const [, ...otherMethods] = comparisonMethods;
const methods: [ComparisonMethod, ...ComparisonMethod[]] = ['lsd', ...otherMethods];

/** Trait, alpha and comparison as the address holds them; without alpha the trial's own counts. */
export function readAnalysisChoice(
  search: URLSearchParams,
  traitSlugs: readonly string[],
  view: AnalysisQuery['view'],
): AnalysisQuery {
  const asked = search.get('trait');
  const first = traitSlugs.includes('yield') ? 'yield' : (traitSlugs[0] ?? 'yield');
  const trait = asked !== null && traitSlugs.includes(asked) ? asked : first;
  const alpha = alphas.find((value) => String(value) === search.get('alpha'));
  return { trait, view, comparison: readChoice(search, 'comparison', methods), ...(alpha && { alpha }) };
}

type TrialChoicesProps = {
  traits: readonly Trait[];
  choice: AnalysisQuery;
  /** A published summary gives one LSD and no choice of comparison. */
  hasComparison: boolean;
  /** In force: that of the address, or the trial's own. */
  alpha: number;
};

/** What to look at: one trait, at one level, by one comparison. */
export function TrialChoices({ traits, choice, hasComparison, alpha }: TrialChoicesProps) {
  const { t } = useTranslation(['trials', 'analysis']);
  const format = useFormat();
  const language = useLanguage();
  const patch = useUrlPatch();
  const isOrdinal = traits.find((trait) => trait.slug === choice.trait)?.kind === 'ordinal';
  return (
    <form
      aria-label={t('trials:page.choices')}
      onSubmit={(event) => event.preventDefault()}
      className="grid gap-3 sm:grid-cols-3"
    >
      <Field label={t('trials:page.trait')}>
        <Select
          value={choice.trait}
          onChange={(event) => patch({ trait: event.target.value })}
          options={traits.map((trait) => ({ value: trait.slug, label: nameTrait(trait, language) }))}
        />
      </Field>
      {!isOrdinal && (
        <>
          <Field label={t('trials:page.alpha')}>
            <Select
              value={String(alpha)}
              onChange={(event) => patch({ alpha: event.target.value })}
              options={alphas.map((value) => ({
                value: String(value),
                label: format.percent(value * 100),
              }))}
            />
          </Field>
          {hasComparison && (
            <Field label={t('trials:page.comparison')}>
              <Select
                value={choice.comparison}
                onChange={(event) => patch({ comparison: event.target.value })}
                options={methods.map((method) => ({
                  value: method,
                  label: t(`analysis:comparison.${method}`),
                }))}
              />
            </Field>
          )}
        </>
      )}
    </form>
  );
}
