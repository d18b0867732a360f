import { BaseSequencer, type TestSpecification } from 'vitest/node';

/** What takes longest though its file is short, the longest first: begun last, it would keep one core idle. */
const long = [
  'start-command',
  'page-load',
  'weigh-up-page',
  'private-cluster',
  'import-published',
  'mail-outbox',
  'render-copy-pdf',
  'analyse-door',
];

const placeOf = ({ moduleId }: TestSpecification): number => {
  const place = long.findIndex((name) => moduleId.includes(`/${name}.test.`));
  return place < 0 ? long.length : place;
};

/** The order in which files begin: a fresh checkout has no times of an earlier run to go by. */
export class LongestFirst extends BaseSequencer {
  override async sort(files: TestSpecification[]): Promise<TestSpecification[]> {
    const bySize = await super.sort(files);
    return bySize.toSorted((a, b) => placeOf(a) - placeOf(b));
  }
}
