const startedAt = performance.now();

/**
 * Shows one step of a longer job: its name at once, its outcome and time when it ends.
 * @template T
 * @param {string} label
 * @param {(tell: (outcome: string) => void) => Promise<T>} work may tell its outcome in a few words
 * @returns {Promise<T>}
 */
export async function runStep(label, work) {
  const from = performance.now();
  let outcome = 'ok';
  process.stdout.write(`  ${label} … `);
  try {
    const result = await work((words) => {
      outcome = words;
    });
    process.stdout.write(`${outcome} (${formatSeconds(performance.now() - from)})\n`);
    return result;
  } catch (error) {
    process.stdout.write(`failed (${formatSeconds(performance.now() - from)})\n`);
    throw error;
  }
}

/** Seconds since this process began its work, as a person reads them. */
export function secondsSoFar() {
  return formatSeconds(performance.now() - startedAt);
}

/** @param {number} milliseconds */
export function formatSeconds(milliseconds) {
  return `${(milliseconds / 1000).toFixed(1)} s`;
}
