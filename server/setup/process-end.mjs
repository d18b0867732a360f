import { endPrograms } from './run-program.mjs';
import { printFailure } from './setup-error.mjs';

const undoings = [];
let stopping = null;

/**
 * Has something undone when this process ends, whichever way; the last registered goes first.
 * @param {() => Promise<void>} undo
 */
export function undoAtEnd(undo) {
  undoings.push(undo);
}

/** Ends this process after undoing what was registered. A second call while that runs changes nothing. */
export function endProcess(code) {
  stopping ??= undoAll().then(() => process.exit(code));
  return stopping;
}

/** Whether the process is already on its way out, so that a step that fails now is no news. */
export function isEnding() {
  return stopping !== null;
}

async function undoAll() {
  endPrograms();
  for (const undo of undoings.reverse()) {
    try {
      await undo();
    } catch (error) {
      printFailure(error);
    }
  }
}

/**
 * Ends the process cleanly on Ctrl-C, a kill, a closed terminal, or an error that nobody handled.
 * A second Ctrl-C does not wait any longer.
 * @param {() => void} sayGoodbye called once, when the first signal comes
 */
export function endOnSignals(sayGoodbye) {
  const exitCodes = { SIGINT: 130, SIGTERM: 143, SIGHUP: 129 };
  for (const [signal, code] of Object.entries(exitCodes)) {
    process.on(signal, () => {
      if (isEnding()) {
        // npm passes a terminal's Ctrl-C on a second time within moments; only a later one is a person's.
        if (performance.now() - endingSince > 1000) process.exit(code);
        return;
      }
      endingSince = performance.now();
      sayGoodbye();
      void endProcess(code);
    });
  }
  for (const event of ['uncaughtException', 'unhandledRejection']) {
    process.on(event, (error) => {
      if (!isEnding()) printFailure(error);
      void endProcess(1);
    });
  }
}

let endingSince = 0;
