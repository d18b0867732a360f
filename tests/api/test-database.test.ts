import { sql } from 'drizzle-orm';
import { afterAll, expect, test } from 'vitest';
import { createTestDatabase, type TestDatabase } from '#tests/support/test-database.ts';

const opened: TestDatabase[] = [];
afterAll(async () => {
  await Promise.all(opened.map((database) => database.close()));
});

test('each test database has the whole schema and nothing of another', async () => {
  const first = await createTestDatabase();
  opened.push(first);
  const second = await createTestDatabase();
  opened.push(second);
  await first.db.execute(sql`insert into regions (slug, name_en, name_fr) values ('one', 'One', 'Un')`);
  const { rows } = await second.db.execute(sql`select count(*)::int as count from regions`);
  expect(rows).toEqual([{ count: 0 }]);
});
