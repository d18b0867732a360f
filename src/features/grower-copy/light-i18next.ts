/**
 * Stands for `i18next` in the script of the grower copy, where the library itself would not fit: sentences that are
 * all there from the start, with what our own sentences use of it. A test holds it against the library.
 */

type Values = Readonly<Record<string, unknown>>;
type Texts = { readonly [key: string]: string | Texts };
/** By language, then namespace. */
type Resources = Readonly<Record<string, Readonly<Record<string, Texts>>>>;
type Format = (value: unknown, tag: string | undefined, options: object) => string;
type Options = { lng: string; defaultNS: string; resources: Resources };

export type Translate = (key: string, values?: Values) => string;
export type LightI18n = ReturnType<typeof createInstance>;

/** An instance as `i18next.createInstance` gives one, to be filled by `init`. */
export function createInstance() {
  const formats = new Map<string, Format>();
  let options: Options = { lng: '', defaultNS: '', resources: {} };
  let plurals = new Intl.PluralRules();

  function find(namespaces: readonly string[], key: string): string | undefined {
    const cut = key.indexOf(':');
    const path = key.slice(cut + 1).split('.');
    for (const namespace of cut < 0 ? namespaces : [key.slice(0, cut)]) {
      const text = path.reduce<string | Texts | undefined>(
        (texts, part) => (typeof texts === 'object' ? texts[part] : undefined),
        options.resources[options.lng]?.[namespace],
      );
      if (typeof text === 'string') return text;
    }
    return undefined;
  }

  /** A placeholder's value, by the format behind its comma where there is one: `cv, percent(decimals: 1)`. */
  function write(placeholder: string, values: Values): string {
    const [name = '', ...rest] = placeholder.split(',');
    const value = values[name.trim()];
    // A value that was forgotten shows as its placeholder, as with the library: it is seen, and not read over.
    if (value === undefined) return `{{${placeholder}}}`;
    const format = rest.join(',').trim();
    if (format === '') return String(value);
    const [formatName = '', given = ''] = format.split('(');
    const found = formats.get(formatName.trim());
    return found
      ? found(value, options.lng, { ...readOptions(given.slice(0, -1)), ...values })
      : String(value);
  }

  /** The keys that a sentence may stand under, the most special first. */
  function listKeys(key: string, { context, count }: Values): string[] {
    const bases = context === undefined || context === '' ? [key] : [`${key}_${String(context)}`, key];
    if (typeof count !== 'number') return bases;
    const forms = [...(count === 0 ? ['zero'] : []), plurals.select(count)];
    return bases.flatMap((base) => [...forms.map((form) => `${base}_${form}`), base]);
  }

  const fixT =
    (namespaces: readonly string[]): Translate =>
    (key, values = {}) => {
      for (const candidate of listKeys(key, values)) {
        const text = find(namespaces, candidate);
        if (text !== undefined)
          return text.replace(/\{\{(.+?)\}\}/g, (_, inner: string) => write(inner, values));
      }
      return key.slice(key.indexOf(':') + 1);
    };

  return {
    get language() {
      return options.lng;
    },
    services: {
      formatter: { add: (name: string, format: Format): void => void formats.set(name, format) },
    },
    init: (given: Options): void => {
      options = given;
      plurals = new Intl.PluralRules(given.lng);
    },
    exists: (key: string): boolean => find([options.defaultNS], key) !== undefined,
    t: ((key, values) => fixT([options.defaultNS])(key, values)) as Translate,
    fixT,
  };
}

/** `decimals: 2; unit: t/ha` as an object; figures become numbers. */
function readOptions(text: string): Record<string, string | number> {
  const pairs = text.split(';').flatMap((pair): [string, string | number][] => {
    const [name = '', ...rest] = pair.split(':');
    const value = rest.join(':').trim();
    if (value === '') return [];
    return [[name.trim(), Number.isNaN(Number(value)) ? value : Number(value)]];
  });
  return Object.fromEntries(pairs);
}
