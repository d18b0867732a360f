import type { Locator, Page } from 'playwright-core';

/** What one key in a field took. */
export type TimedKey = {
  /** From the key to the paint that shows what followed from it, ms in steps of 8; 16 stands for what is less. */
  paintMs: number;
  /** Of it, the time in which the page's own scripts ran, ms. */
  scriptMs: number;
};

/** An event that the browser times is told when it took 16 ms or more, which is as low as it goes. */
const leastMs = 16;
/** Longer than any key takes, and than it takes the browser to tell. */
const pauseMs = 250;

/** Notes what the browser tells of each key, and when the answer first changed; what is folded away may follow later. */
const listen = `(selector) => {
  const answer = document.querySelector(selector);
  const heard = { keys: [], changedAt: 0 };
  new PerformanceObserver((list) => {
    for (const { name, startTime, duration, processingStart, processingEnd } of list.getEntries())
      if (name === 'input') heard.keys.push({ startTime, duration, script: processingEnd - processingStart });
  }).observe({ type: 'event', durationThreshold: ${leastMs} });
  new MutationObserver(() => { heard.changedAt ||= performance.now(); })
    .observe(answer, { subtree: true, childList: true, characterData: true });
  window.heardKeys = heard;
}`;

/** What was heard since it was asked last. */
const takeHeard = `(() => {
  const { keys, changedAt } = window.heardKeys;
  window.heardKeys.keys = [];
  window.heardKeys.changedAt = 0;
  return { keys, changedAt };
})()`;

type Heard = {
  keys: { startTime: number; duration: number; script: number }[];
  /** 0 where the answer did not change. */
  changedAt: number;
};

/**
 * Takes the last digit of a figure away and types another, so many times over. The digit changes the answer, and is
 * only timed if the answer had changed before the paint that is told of.
 * @param answer selector of what must change
 * @throws Error when a digit left the answer as it was, or the answer came after the paint
 */
export async function timeEdits(
  page: Page,
  field: Locator,
  answer: string,
  edits: number,
): Promise<{ digits: TimedKey[]; removals: TimedKey[] }> {
  await field.click();
  await page.evaluate(`(${listen})(${JSON.stringify(answer)})`);
  const digits: TimedKey[] = [];
  const removals: TimedKey[] = [];
  for (let edit = 0; edit < edits; edit += 1) {
    await page.keyboard.press('End');
    removals.push(readKey(await press(page, 'Backspace')));
    const heard = await press(page, String((edit + 3) % 10));
    if (heard.changedAt === 0) throw new Error('a digit left the answer as it was');
    const [key] = heard.keys;
    if (key && heard.changedAt > key.startTime + key.duration)
      throw new Error('the answer came after the paint');
    digits.push(readKey(heard));
  }
  return { digits, removals };
}

async function press(page: Page, key: string): Promise<Heard> {
  await page.evaluate(takeHeard);
  await page.keyboard.press(key);
  await page.waitForTimeout(pauseMs);
  return page.evaluate<Heard>(takeHeard);
}

const readKey = ({ keys: [key] }: Heard): TimedKey => ({
  paintMs: key?.duration ?? leastMs,
  scriptMs: key?.script ?? 0,
});
