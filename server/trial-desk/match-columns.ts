import { yieldUnits, type YieldUnit } from '#shared/units.ts';

/** The parts of a plot that a column may hold. */
export const columnFields = [
  'plot',
  'entry',
  'rep',
  'block',
  'row',
  'col',
  'main',
  'trait',
  'value',
  'check',
] as const;
export type ColumnField = (typeof columnFields)[number];

/** Usual headers in English and French, and those of BrAPI v2; without case, accents, spaces and signs. */
const usualHeaders: Record<ColumnField, readonly string[]> = {
  plot: [
    'plot',
    'plotid',
    'plotno',
    'plotnumber',
    'observationunitdbid',
    'observationunitname',
    'parcelle',
    'noparcelle',
    'numerodeparcelle',
  ],
  entry: [
    'entry',
    'entryname',
    'variety',
    'cultivar',
    'genotype',
    'gen',
    'germplasmname',
    'germplasm',
    'treatment',
    'trt',
    'variete',
    'traitement',
  ],
  rep: ['rep', 'replicate', 'replication', 'repetition', 'replicat'],
  block: ['block', 'blocknumber', 'blk', 'bloc', 'nobloc'],
  row: ['row', 'fieldrow', 'positioncoordinatey', 'ligne', 'rang'],
  col: ['col', 'column', 'fieldcolumn', 'positioncoordinatex', 'colonne'],
  main: ['main', 'mainplot', 'wholeplot', 'mainlevel', 'grandeparcelle', 'parcelleprincipale'],
  trait: ['trait', 'observationvariablename', 'observationvariable', 'variable', 'caractere'],
  value: ['value', 'observationvalue', 'valeur'],
  check: ['entrytype', 'check', 'temoin'],
};

export type TraitName = { slug: string; names: readonly string[] };

/** A column of values: which trait, and the unit that the header itself states. */
export type ValueColumn = { index: number; header: string; traitSlug: string; statedUnit: YieldUnit | null };

export type MatchedColumns = {
  fields: Partial<Record<ColumnField, number>>;
  factors: { name: string; index: number }[];
  values: ValueColumn[];
};

export type ColumnFault = { reason: 'column-twice' | 'named-column-missing'; column: string };

export type ColumnChoice = {
  /** Headers chosen by hand, by what they hold; they go before the usual names. */
  columns?: Partial<Record<ColumnField, string>>;
  /** Headers of the factors of a factorial. */
  factors?: readonly string[];
  traits: readonly TraitName[];
  /** Trait of a lone value column. */
  trait: string;
};

/** Without case, accents, bracketed units, spaces and signs. */
export function plainHeader(header: string): string {
  return header
    .replace(/[([].*$/, '')
    .normalize('NFD')
    .toLowerCase()
    .replace(/[^a-z0-9]/g, '');
}

/** Finds what each column of a file holds. Columns that match nothing are passed over. */
export function matchColumns(
  header: readonly string[],
  choice: ColumnChoice,
): { matched: MatchedColumns; faults: ColumnFault[] } {
  const faults: ColumnFault[] = [];
  const chosen = new Map<number, ColumnField | 'factor'>();
  const fields: Partial<Record<ColumnField, number>> = {};
  const factors: MatchedColumns['factors'] = [];
  const findNamed = (name: string): number => {
    const index = header.findIndex((one) => one.trim().toLowerCase() === name.trim().toLowerCase());
    if (index < 0) faults.push({ reason: 'named-column-missing', column: name });
    return index;
  };
  for (const field of columnFields) {
    const name = choice.columns?.[field];
    const index = name === undefined ? -1 : findNamed(name);
    if (index < 0) continue;
    fields[field] = index;
    chosen.set(index, field);
  }
  for (const name of choice.factors ?? []) {
    const index = findNamed(name);
    if (index < 0) continue;
    factors.push({ name, index });
    chosen.set(index, 'factor');
  }
  const values: ValueColumn[] = [];
  header.forEach((one, index) => {
    if (chosen.has(index)) return;
    const plain = plainHeader(one);
    const field = columnFields.find((name) => usualHeaders[name].includes(plain));
    if (field !== undefined) {
      if (choice.columns?.[field] !== undefined) return;
      if (fields[field] === undefined) fields[field] = index;
      else faults.push({ reason: 'column-twice', column: one });
      return;
    }
    const trait = choice.traits.find((name) => name.names.some((known) => plainHeader(known) === plain));
    // With one value column chosen by hand, or a trait column, the other traits' columns are not asked for.
    if (trait === undefined || choice.columns?.value !== undefined || fields.trait !== undefined) return;
    if (values.some((known) => known.traitSlug === trait.slug)) {
      faults.push({ reason: 'column-twice', column: one });
      return;
    }
    values.push({ index, header: one, traitSlug: trait.slug, statedUnit: statedUnit(one) });
  });
  const lone = fields.value;
  if (lone !== undefined && fields.trait === undefined) {
    const name = header[lone] ?? '';
    values.push({ index: lone, header: name, traitSlug: choice.trait, statedUnit: statedUnit(name) });
  }
  return { matched: { fields, factors, values }, faults };
}

/** `Yield (kg/ha)` states its unit. */
function statedUnit(header: string): YieldUnit | null {
  const bracketed = /[([]\s*([^)\]]+?)\s*[)\]]/.exec(header)?.[1]?.toLowerCase().replace(/\s/g, '');
  return yieldUnits.find((unit) => unit === bracketed) ?? null;
}
