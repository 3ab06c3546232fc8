import { closeSync, mkdirSync, openSync, readFileSync, rmSync, statSync, writeSync } from 'node:fs';
import { dirname } from 'node:path';

const sleep = (milliseconds) => new Promise((resolve) => setTimeout(resolve, milliseconds));

const isAlive = (pid) => {
  try {
    process.kill(pid, 0);
    return true;
  } catch (error) {
    return error.code === 'EPERM';
  }
};

/** True when the process that wrote the lock is gone, so that an interrupted run never blocks the next one. */
function isAbandoned(path) {
  try {
    const pid = Number(readFileSync(path, 'utf8'));
    if (pid > 0) return !isAlive(pid);
    // The owner writes its number right after making the file; an old empty file was left by a crash between the two.
    return Date.now() - statSync(path).mtimeMs > 5000;
  } catch {
    return false;
  }
}

/**
 * Runs `work` while this process alone holds the lock file; waits for another live process that holds it.
 * @param path   file that stands for the lock
 * @param work   function to run; its result is returned
 * @param onWait called once when another process has to be waited for
 */
export async function withLock(path, work, onWait = () => {}) {
  mkdirSync(dirname(path), { recursive: true });
  let told = false;
  for (;;) {
    try {
      const file = openSync(path, 'wx');
      writeSync(file, String(process.pid));
      closeSync(file);
      break;
    } catch (error) {
      if (error.code !== 'EEXIST') throw error;
      if (isAbandoned(path)) {
        rmSync(path, { force: true });
        continue;
      }
      if (!told) onWait();
      told = true;
      await sleep(150);
    }
  }
  const release = () => rmSync(path, { force: true });
  process.once('exit', release);
  try {
    return await work();
  } finally {
    process.removeListener('exit', release);
    release();
  }
}
