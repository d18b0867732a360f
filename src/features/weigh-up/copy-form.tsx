import { useRef, useState } from 'react';
import { useTranslation } from 'react-i18next';
import { languages, type Language } from '#shared/language.ts';
import { phoneNumber } from '#shared/account.ts';
import { mailRecipient } from '#shared/grower-copy.ts';
import { Button } from '#src/components/button.tsx';
import { Field } from '#src/components/field.tsx';
import { Select } from '#src/components/select.tsx';
import { useLanguage } from '#src/components/use-language.ts';
import { ContactField } from './contact-field.tsx';

const year = 365;
const validities = [30, 90, year];

/** What a new copy is to be; without `email` its link is handed over by other ways. */
export type CopyWish = { language: Language; validDays: number; email?: string };

type CopyFormProps = {
  hasUnsaved: boolean;
  isBusy: boolean;
  /** What growers may call, as it stands in the account; null for none. */
  phone: string | null;
  /** Whether the server can send mail; null while that is not known yet. */
  isMailSetUp: boolean | null;
  /** @param phone for this copy and those after it */
  onMake: (wish: CopyWish, phone: string | null) => void;
};

/** Language, validity, whom to call and, where mail can be sent, the grower's address. */
export function CopyForm({ hasUnsaved, isBusy, phone, isMailSetUp, onMake }: CopyFormProps) {
  const { t } = useTranslation(['weigh-up', 'common']);
  const pageLanguage = useLanguage();
  const [language, setLanguage] = useState<Language | null>(null);
  const [validDays, setValidDays] = useState(year);
  const [address, setAddress] = useState('');
  const [dialled, setDialled] = useState(phone ?? '');
  const [bad, setBad] = useState<'address' | 'phone' | null>(null);
  const addressField = useRef<HTMLInputElement>(null);
  const phoneField = useRef<HTMLInputElement>(null);
  const chosen = language ?? pageLanguage;
  const isSent = isMailSetUp === true && address.trim() !== '';
  const submit = () => {
    const wish = { language: chosen, validDays };
    const recipient = isSent ? mailRecipient.safeParse(address) : null;
    const called = dialled.trim() === '' ? null : phoneNumber.safeParse(dialled);
    if (called?.success === false) {
      setBad('phone');
      phoneField.current?.focus();
    } else if (recipient?.success === false) {
      setBad('address');
      addressField.current?.focus();
    } else {
      setBad(null);
      onMake(recipient === null ? wish : { ...wish, email: recipient.data }, called?.data ?? null);
    }
  };
  return (
    <form
      noValidate
      className="flex flex-col gap-4"
      onSubmit={(event) => {
        event.preventDefault();
        submit();
      }}
    >
      <div className="grid gap-4 sm:max-w-md sm:grid-cols-2">
        <Field label={t('weigh-up:copies.language')}>
          <Select
            value={chosen}
            onChange={(event) => setLanguage(languages.find((code) => code === event.target.value) ?? null)}
            options={languages.map((code) => ({ value: code, label: t(`common:languageName.${code}`) }))}
          />
        </Field>
        <Field label={t('weigh-up:copies.validDays')}>
          <Select
            value={String(validDays)}
            onChange={(event) => setValidDays(Number(event.target.value))}
            options={validities.map((days) => ({
              value: String(days),
              label: days === year ? t('weigh-up:copies.year') : t('weigh-up:copies.days', { count: days }),
            }))}
          />
        </Field>
        <ContactField
          kind="tel"
          label={t('weigh-up:copies.phone')}
          hint={t('weigh-up:copies.phoneHint')}
          error={bad === 'phone' ? t('weigh-up:copies.badPhone') : undefined}
          className="sm:col-span-2"
          ref={phoneField}
          value={dialled}
          onValueChange={setDialled}
        />
        {isMailSetUp === true && (
          <ContactField
            kind="email"
            label={t('weigh-up:copies.email')}
            hint={t('weigh-up:copies.emailHint')}
            error={bad === 'address' ? t('weigh-up:copies.badAddress') : undefined}
            className="sm:col-span-2"
            ref={addressField}
            value={address}
            onValueChange={setAddress}
          />
        )}
      </div>
      {isMailSetUp === false && (
        <p className="max-w-prose text-sm text-faded">{t('weigh-up:copies.mailNotSetUp')}</p>
      )}
      {hasUnsaved && <p className="text-sm font-semibold">{t('weigh-up:copies.saveFirst')}</p>}
      <Button type="submit" tone="main" className="self-start" isBusy={isBusy} disabled={hasUnsaved}>
        {isSent ? t('weigh-up:copies.makeAndSend') : t('weigh-up:copies.make')}
      </Button>
    </form>
  );
}
