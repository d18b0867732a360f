import type { Language } from '#shared/account.ts';
import type { CopyMailContent } from './mail-content.ts';
import { openMailSentences } from './mail-sentences.ts';

export type RenderedMail = { subject: string; text: string; html: string };

/** Colours of the product's paper and ink; a mail has no style sheet to take them from. */
const look = {
  page: 'margin:0;padding:24px;background:#faf6ec;color:#22261f;font:16px/1.5 "Noto Sans",Arial,sans-serif',
  letter: 'max-width:560px;margin:0 auto;padding:24px;background:#fffdf7;border:1px solid #d8d0bb',
  paragraph: 'margin:0 0 16px',
  button:
    'display:inline-block;padding:12px 20px;background:#1d4e6b;color:#ffffff;font-weight:600;text-decoration:none',
  small: 'margin:0 0 16px;font-size:14px;color:#5d5f55;overflow-wrap:anywhere',
};

/**
 * The letter that brings a grower copy, as plain text and as HTML without anything fetched from elsewhere.
 * @param link the whole address of the copy
 */
export function renderCopyMail(content: CopyMailContent, link: string, language: Language): RenderedMail {
  const { t } = openMailSentences(language);
  const { growerName: grower, farmName: farm, advisorName: advisor, advisorEmail: email } = content;
  const crop = content.cropName[language];
  const subject = t('copy.subject', { crop, farm });
  const greeting = t('copy.greeting', { grower });
  const intro = t('copy.intro', { advisor, farm, crop });
  const open = t('copy.open');
  const inside = t('copy.inside');
  const until = t('copy.until', { on: content.expiresAt, timeZone: content.timeZone });
  const phone = content.advisorPhone;
  const questions =
    phone === null
      ? t('copy.questions', { advisor, email })
      : t('copy.questionsOrCall', { advisor, email, phone });
  const why = t('copy.why', { advisor });
  const paragraph = (text: string, style = look.paragraph) => `<p style='${style}'>${escapeHtml(text)}</p>`;
  const href = escapeHtml(link);
  return {
    subject,
    text: `${[greeting, intro, `${open}\n${link}`, inside, until, questions, why].join('\n\n')}\n`,
    html: [
      `<!doctype html><html lang="${language}"><head><meta charset="utf-8"><title>${escapeHtml(subject)}</title></head>`,
      `<body style='${look.page}'><div style='${look.letter}'>`,
      paragraph(greeting),
      paragraph(intro),
      `<p style='${look.paragraph}'><a href="${href}" style='${look.button}'>${escapeHtml(t('copy.button'))}</a></p>`,
      `<p style='${look.small}'>${escapeHtml(open)}<br><a href="${href}">${href}</a></p>`,
      paragraph(inside),
      paragraph(until),
      paragraph(questions),
      paragraph(why, look.small),
      '</div></body></html>\n',
    ].join('\n'),
  };
}

const entities: Record<string, string> = {
  '&': '&amp;',
  '<': '&lt;',
  '>': '&gt;',
  '"': '&quot;',
  "'": '&#39;',
};

const escapeHtml = (text: string): string => text.replace(/[&<>"']/g, (sign) => entities[sign] ?? sign);
