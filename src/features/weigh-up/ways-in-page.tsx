import { useTranslation } from 'react-i18next';
import { SectionLink } from '#src/components/folded-section.tsx';

const sections = [
  'cautions',
  'traits',
  'money',
  'question',
  'farm',
  'hand-over',
  'decision',
  'method',
] as const;

/** The ways to the parts of a long page; where the screen is wide they are in view anyway. */
export function WaysInPage() {
  const { t } = useTranslation('weigh-up');
  return (
    <nav aria-label={t('page.ways')} className="lg:hidden print:hidden">
      <ul className="flex flex-wrap gap-x-4">
        {sections.map((id) => (
          <li key={id}>
            <SectionLink id={id} className="tap-target inline-flex items-center">
              {t(`page.way.${id}`)}
            </SectionLink>
          </li>
        ))}
      </ul>
    </nav>
  );
}
