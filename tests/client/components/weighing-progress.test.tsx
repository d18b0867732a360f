import { screen } from '@testing-library/react';
import { expect, test } from 'vitest';
import { WeighingProgress } from '#src/components/weighing-progress.tsx';
import { renderClient } from '#tests/client/support/render-client.tsx';

test('what is on its way is at first only that, and then what the server is at', async () => {
  await renderClient(<WeighingProgress lines={3} />);
  expect(screen.queryByRole('progressbar')).toBeNull();
  const bar = await screen.findByRole('progressbar', {}, { timeout: 5000 });
  expect(bar).toBe(screen.getByLabelText('The trials are being weighed together …'));
  expect(bar.hasAttribute('value')).toBe(false);
});
