import fs from "node:fs";
import path from "node:path";

const largest = 20 * 1024 * 1024;

/**
 * A log whose lines begin with the time. When it has grown large, one older part is kept beside it.
 *
 * @param {string} directory
 * @param {string} name
 */
export function openLog(directory, name) {
  fs.mkdirSync(directory, { recursive: true });
  const file = path.join(directory, `${name}.log`);
  let descriptor = fs.openSync(file, "a", 0o600);
  let size = fs.fstatSync(descriptor).size;
  let pending = "";
  let closed = false;

  /** @param {string} text */
  const line = (text) => {
    size += fs.writeSync(descriptor, `${new Date().toISOString()} ${text}\n`);
    if (size < largest) return;
    fs.closeSync(descriptor);
    fs.renameSync(file, `${file}.old`);
    descriptor = fs.openSync(file, "a", 0o600);
    size = 0;
  };

  return {
    file,
    line,
    /** @param {string} chunk */
    write(chunk) {
      if (closed) return;
      const lines = (pending + chunk).split("\n");
      pending = lines.pop() ?? "";
      lines.forEach(line);
    },
    close() {
      if (pending) line(pending);
      closed = true;
      fs.closeSync(descriptor);
    },
  };
}
