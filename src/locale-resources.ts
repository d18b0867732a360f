import type accounts from '#locales/en/accounts.json';
import type analysis from '#locales/en/analysis.json';
import type cautions from '#locales/en/cautions.json';
import type common from '#locales/en/common.json';
import type copy from '#locales/en/copy.json';
import type desk from '#locales/en/desk.json';
import type drawings from '#locales/en/drawings.json';
import type errors from '#locales/en/errors.json';
import type method from '#locales/en/method.json';
import type print from '#locales/en/print.json';
import type problems from '#locales/en/problems.json';
import type record from '#locales/en/record.json';
import type signIn from '#locales/en/sign-in.json';
import type trials from '#locales/en/trials.json';
import type verdicts from '#locales/en/verdicts.json';
import type weighUp from '#locales/en/weigh-up.json';

/** Every namespace with the shape of its English sentences: this is what makes an unknown key a compile error. */
export type LocaleResources = {
  accounts: typeof accounts;
  analysis: typeof analysis;
  cautions: typeof cautions;
  common: typeof common;
  copy: typeof copy;
  desk: typeof desk;
  drawings: typeof drawings;
  errors: typeof errors;
  method: typeof method;
  print: typeof print;
  problems: typeof problems;
  record: typeof record;
  'sign-in': typeof signIn;
  trials: typeof trials;
  verdicts: typeof verdicts;
  'weigh-up': typeof weighUp;
};

declare module 'i18next' {
  interface CustomTypeOptions {
    defaultNS: 'common';
    resources: LocaleResources;
  }
}

export type Namespace = keyof LocaleResources;
