import { spawn } from 'node:child_process';
import { mkdtempSync, readFileSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { setTimeout as sleep } from 'node:timers/promises';
import { projectRoot } from './ground.mjs';
import { isEnding, undoAtEnd } from './process-end.mjs';
import { formatSeconds } from './progress.mjs';

/** No check takes a quarter of this, even on a busy machine. */
const limitMinutes = 20;

/**
 * A list of checks, each shown with its time, and the one line that closes it.
 * A check that is no test run counts as one test.
 */
export function beginTestRun() {
  const folder = mkdtempSync(join(tmpdir(), 'gavelrow-tests-'));
  undoAtEnd(async () => rmSync(folder, { recursive: true, force: true }));
  const totals = { passed: 0, failed: 0, skipped: 0 };
  const outcomes = [];
  let lastWord = Promise.resolve();

  /** One at a time, so that of two things done at once neither is told in the middle of the other. */
  const aloud = (work) => {
    const told = lastWord.then(work);
    lastWord = told.catch(() => undefined);
    return told;
  };

  const close = (label, took, { passed, failed, skipped }) => {
    totals.passed += passed;
    totals.failed += failed;
    totals.skipped += skipped;
    const time = formatSeconds(took);
    outcomes.push(`  ${failed === 0 ? '✓' : '✗'} ${label} (${time})`);
    console.log(`${failed === 0 ? '✓' : '✗'} ${label} (${time})`);
  };

  /** Tests of some of vitest's projects, counted one by one. */
  const testAloud = async (label, projects) => {
    const from = performance.now();
    console.log(`\n• ${label}`);
    const summary = join(folder, `${projects.join('-')}.json`);
    const args = [
      ...['node_modules/vitest/vitest.mjs', 'run'],
      ...['--silent=passed-only'],
      ...projects.map((name) => `--project=${name}`),
    ];
    const { code } = await runShown(process.execPath, args, { SUMMARY_FILE: summary });
    const counts = readCounts(summary);
    const isUncounted = code !== 0 && counts.failed === 0;
    close(label, performance.now() - from, { ...counts, failed: counts.failed + (isUncounted ? 1 : 0) });
  };

  return {
    /**
     * A program that says by its exit code whether all is well. What it prints is shown when it is over and nothing
     * else is being told, so that it may run beside others.
     */
    async check(label, program, args, env = {}) {
      const from = performance.now();
      const { code, printed } = await runShown(program, args, env, 'pipe');
      const took = performance.now() - from;
      await aloud(() => {
        console.log(`\n• ${label}`);
        process.stdout.write(printed);
        close(label, took, { passed: code === 0 ? 1 : 0, failed: code === 0 ? 0 : 1, skipped: 0 });
      });
    },

    test: (label, projects) => aloud(() => testAloud(label, projects)),

    aloud,

    /** Prints what happened and the closing line. @returns {number} the exit code */
    finish(time) {
      const skipped = totals.skipped === 0 ? '' : `, ${totals.skipped} skipped`;
      console.log(`\n${outcomes.join('\n')}\n  ${time} in all\n`);
      console.log(`${totals.passed} passed, ${totals.failed} failed${skipped}`);
      return totals.failed === 0 && totals.passed > 0 ? 0 : 1;
    },
  };
}

function readCounts(path) {
  try {
    const { passed, failed, skipped } = JSON.parse(readFileSync(path, 'utf8'));
    return { passed, failed, skipped };
  } catch {
    return { passed: 0, failed: 0, skipped: 0 };
  }
}

/**
 * What the program prints goes straight to the terminal, or is given back where `output` is a pipe. It leads a process group, which is ended with this process: a
 * worker that is caught in a loop hears no polite signal.
 */
function runShown(program, args, env, output = 'inherit') {
  return new Promise((resolve) => {
    // Nothing more is begun, and nothing counted, on the way out.
    if (isEnding()) return;
    const child = spawn(program, args, {
      cwd: projectRoot,
      env: { ...process.env, ...env },
      stdio: ['ignore', output, output],
      detached: true,
    });
    let printed = '';
    for (const stream of [child.stdout, child.stderr]) {
      stream?.setEncoding('utf8').on('data', (part) => {
        printed += part;
      });
    }
    const closed = new Promise((settle) => {
      child.once('close', settle);
    });
    let isOver = false;
    const end = async () => {
      if (isOver) return;
      signalGroup(child.pid, 'SIGTERM');
      await Promise.race([closed, sleep(3000)]);
      signalGroup(child.pid, 'SIGKILL');
    };
    undoAtEnd(end);
    const tooLong = setTimeout(() => {
      console.error(`Ended after ${limitMinutes} minutes: something in it does not come back.`);
      void end();
    }, limitMinutes * 60_000);
    child.on('error', (error) => {
      console.error(error.message);
      resolve({ code: 1, printed });
    });
    void closed.then((code) => {
      clearTimeout(tooLong);
      isOver = true;
      if (!isEnding()) resolve({ code: code ?? 1, printed });
    });
  });
}

function signalGroup(pid, signal) {
  try {
    process.kill(-pid, signal);
  } catch {
    // The whole group has ended already.
  }
}
