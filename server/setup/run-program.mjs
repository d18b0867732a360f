import { spawn } from 'node:child_process';

/**
 * Runs a program to its end and collects what it prints.
 * @param {string} file
 * @param {readonly string[]} args
 * @param {import('node:child_process').SpawnOptions & { input?: string, isQuiet?: boolean }} [options]
 *   isQuiet: no pipes at all, for programs whose children outlive them and would hold a pipe open
 * @returns {Promise<{ code: number, output: string }>} code −1 when the program could not be started
 */
export function runProgram(file, args, options = {}) {
  const { input, isQuiet, ...spawnOptions } = options;
  return new Promise((resolve) => {
    const stdio = isQuiet ? 'ignore' : [input === undefined ? 'ignore' : 'pipe', 'pipe', 'pipe'];
    const child = spawn(file, args, { stdio, ...spawnOptions });
    let output = '';
    const collect = (chunk) => {
      output += chunk;
    };
    child.stdout?.setEncoding('utf8').on('data', collect);
    child.stderr?.setEncoding('utf8').on('data', collect);
    child.on('error', (error) => resolve({ code: -1, output: `${output}${error.message}` }));
    child.on('close', (code, signal) => {
      resolve({ code: code ?? 1, output: signal === null ? output : `${output}\nended by ${signal}` });
    });
    if (input !== undefined) child.stdin?.end(input);
  });
}
