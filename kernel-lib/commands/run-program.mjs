import { spawn } from 'node:child_process';
import { createWriteStream, mkdirSync } from 'node:fs';
import { dirname } from 'node:path';
import { createInterface } from 'node:readline';

/**
 * Runs a program to its end, both its streams going line by line to `onLine` and to a log file.
 * @returns an object { status, tail } with the last 12 lines printed; status 127 when the program could not be started
 */
export function runProgram(program, parameters, { cwd, env = process.env, log, onLine = () => {} } = {}) {
  return new Promise((resolve) => {
    const tail = [];
    if (log) mkdirSync(dirname(log), { recursive: true });
    const file = log ? createWriteStream(log) : null;
    const child = spawn(program, parameters, { cwd, env, stdio: ['ignore', 'pipe', 'pipe'] });
    const take = (line) => {
      file?.write(`${line}\n`);
      if (line.trim() !== '') tail.push(line);
      if (tail.length > 12) tail.shift();
      onLine(line);
    };
    createInterface({ input: child.stdout }).on('line', take);
    createInterface({ input: child.stderr }).on('line', take);
    const end = (status) => {
      const done = () => resolve({ status, tail: tail.join('\n') });
      if (file) file.end(done);
      else done();
    };
    child.on('error', (error) => {
      take(error.message);
      end(127);
    });
    child.on('close', (status, signal) => end(status ?? (signal ? 130 : 1)));
  });
}
