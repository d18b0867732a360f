import { describe, expect, it } from 'vitest';
import { formatDate, formatDateTime } from '#shared/format-date.ts';

describe('dates', () => {
  it('writes a day in words, the first of a month as French does', () => {
    expect(formatDate('2026-11-14', 'en')).toBe('14 November 2026');
    expect(formatDate('2026-11-14', 'fr')).toBe('14 novembre 2026');
    expect(formatDate('2026-12-01', 'fr')).toBe('1er décembre 2026');
    expect(formatDate('2026-12-11', 'fr')).toBe('11 décembre 2026');
  });

  it('shows a moment in the zone asked for', () => {
    expect(formatDate('2026-12-01T02:30:00Z', 'en', 'America/Montreal')).toBe('30 November 2026');
    expect(formatDateTime('2026-12-01T02:30:00Z', 'en', 'UTC')).toBe('1 December 2026, 02:30 (UTC)');
    expect(formatDateTime('2026-12-01T02:30:00Z', 'fr', 'UTC')).toBe(
      '1er décembre 2026, 02\u00a0h\u00a030 (UTC)',
    );
  });
});
