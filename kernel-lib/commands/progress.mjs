const pause = 10_000;

/** 75 -> "1 min 15 s", 4.2 -> "4 s". */
export function duration(seconds) {
  const whole = Math.round(seconds);
  return whole < 60 ? `${whole} s` : `${Math.floor(whole / 60)} min ${whole % 60} s`;
}

/**
 * Lines that tell how far a command is. On a terminal `update` rewrites one line; elsewhere (a log) it prints a line at most
 * every ten seconds, so that a log shows that work goes on and is not flooded.
 * @param stream where to write, process.stdout by default
 * @returns an object { line, update, end }; `line` prints for good, `end` leaves the last update standing or clears it
 */
export function createProgress(stream = process.stdout) {
  let open = false;
  let last = 0;
  const clear = () => {
    if (open) stream.write('\r\x1b[2K');
    open = false;
  };
  return {
    line(text) {
      clear();
      last = Date.now();
      stream.write(`${text}\n`);
    },
    update(text) {
      if (stream.isTTY) {
        clear();
        stream.write(text.slice(0, (stream.columns || 80) - 1));
        open = true;
      } else if (Date.now() - last > pause) {
        last = Date.now();
        stream.write(`${text}\n`);
      }
    },
    end: clear,
  };
}
