import { create } from 'qrcode';
import { expect, test } from 'vitest';
import { drawCodePath, listBars, quietZone } from '#shared/qr-code-path.ts';

const { modules } = create('https://gavelrow.example.org/copy/Zk3xJ8q2LmN4pR7tVwXyA1bC5dE6fG9h', {
  errorCorrectionLevel: 'M',
});

test('the bars of a code are its dark modules, each once', () => {
  const drawn = new Set<string>();
  for (const { row, start, length } of listBars(modules)) {
    for (let column = start; column < start + length; column += 1) {
      expect(drawn.has(`${row} ${column}`)).toBe(false);
      drawn.add(`${row} ${column}`);
    }
  }
  for (let row = 0; row < modules.size; row += 1)
    for (let column = 0; column < modules.size; column += 1)
      expect(drawn.has(`${row} ${column}`)).toBe(Boolean(modules.get(row, column)));
});

test('the path leaves the quiet zone free on all sides', () => {
  const { path, side } = drawCodePath(modules);
  const bars = [...path.matchAll(/M(\d+) (\d+)h(\d+)v1h-(\d+)z/g)].map((match) => match.slice(1).map(Number));
  expect(bars).toHaveLength(listBars(modules).length);
  for (const [x = 0, y = 0, width = 0, back = 0] of bars) {
    expect(back).toBe(width);
    expect(Math.min(x, y)).toBeGreaterThanOrEqual(quietZone);
    expect(Math.max(x + width, y + 1)).toBeLessThanOrEqual(side - quietZone);
  }
});
