import type common from '#locales/en/common.json';
import type drawings from '#locales/en/drawings.json';
import type errors from '#locales/en/errors.json';
import type signIn from '#locales/en/sign-in.json';

/** Every namespace with the shape of its English sentences: this is what makes an unknown key a compile error. */
type LocaleResources = {
  common: typeof common;
  drawings: typeof drawings;
  errors: typeof errors;
  'sign-in': typeof signIn;
};

declare module 'i18next' {
  interface CustomTypeOptions {
    defaultNS: 'common';
    resources: LocaleResources;
  }
}

export type Namespace = keyof LocaleResources;
