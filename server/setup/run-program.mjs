import { spawn } from 'node:child_process';

const endable = new Set();

/**
 * Runs a program to its end and collects what it prints.
 * @param {string} file
 * @param {readonly string[]} args
 * @param {import('node:child_process').SpawnOptions & { input?: string, isQuiet?: boolean, isEndable?: boolean, onStart?: (pid: number) => void }} [options]
 *   isQuiet: no pipes at all, for programs whose children outlive them and would hold a pipe open;
 *   isEndable: stopped with this process, because half its work does no harm
 * @returns {Promise<{ code: number, output: string }>} code −1 when the program could not be started
 */
export function runProgram(file, args, options = {}) {
  const { input, isQuiet, isEndable, onStart, ...spawnOptions } = options;
  return new Promise((resolve) => {
    const stdio = isQuiet ? 'ignore' : [input === undefined ? 'ignore' : 'pipe', 'pipe', 'pipe'];
    const child = spawn(file, args, { stdio, ...spawnOptions });
    if (isEndable) endable.add(child);
    if (child.pid !== undefined) onStart?.(child.pid);
    let output = '';
    const collect = (chunk) => {
      output += chunk;
    };
    child.stdout?.setEncoding('utf8').on('data', collect);
    child.stderr?.setEncoding('utf8').on('data', collect);
    const finish = (code, text) => {
      endable.delete(child);
      resolve({ code, output: text });
    };
    child.on('error', (error) => finish(-1, `${output}${error.message}`));
    child.on('close', (code, signal) =>
      finish(code ?? 1, signal === null ? output : `${output}\nended by ${signal}`),
    );
    if (input !== undefined) child.stdin?.end(input);
  });
}

/** Ends the programs that may be ended with this process. */
export function endPrograms() {
  for (const child of endable) child.kill('SIGTERM');
}
