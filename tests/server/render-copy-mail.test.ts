import { expect, test } from 'vitest';
import { formatDate } from '#shared/format-date.ts';
import { copyMailContent } from '#server/mail/mail-content.ts';
import { renderCopyMail } from '#server/mail/render-copy-mail.ts';

const link = 'https://advice.example.org/copy/abc';
/** Late in the evening of the last of November in Montréal, the first of December in Greenwich. */
const expiresAt = '2027-12-01T03:30:00.000Z';
const stored = {
  growerName: 'Élise Quern',
  farmName: 'La Pointe',
  cropName: { en: 'Field pea', fr: 'Pois sec' },
  advisorName: 'Ines Quarrel',
  advisorEmail: 'ines@example.org',
  expiresAt,
  link,
};

test.each(['en', 'fr'] as const)(
  'a letter (%s) tells the same last day as the copy, by its advisor’s clock',
  (language) => {
    const timeZone = 'America/Montreal';
    const { text } = renderCopyMail(copyMailContent.parse({ ...stored, timeZone }), link, language);
    expect(text).toContain(formatDate(expiresAt, language, timeZone));
    expect(text).toContain(language === 'en' ? '30 November 2027' : '30 novembre 2027');
  },
);

test('a letter that waits from before that was kept says whose day it tells', () => {
  const { text } = renderCopyMail(copyMailContent.parse(stored), link, 'en');
  expect(text).toContain('valid until 1 December 2027 (UTC)');
});
