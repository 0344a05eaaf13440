// Child of the build: boots Pyodide on our compiled library, unpacks the pure packages, imports
// all of the core, answers every kind of question once, and writes the memory as it then is.
// Usage: node make_snapshot.mjs JOB.json  (JOB: {runtime, stdlib, lock, wheels[], demo, target})
import crypto from "node:crypto";
import { readFileSync, writeFileSync } from "node:fs";
import { loadPyodide } from "pyodide";

const job = JSON.parse(readFileSync(process.argv[2], "utf8"));

// Same inputs, same bytes: the memory must not hold this machine's clock, chance or folder names.
// (The page reseeds `random`; os.urandom asks the browser each time.)
const FIXED_MS = Date.UTC(2020, 0, 1);
const RealDate = Date;
globalThis.Date = class extends RealDate {
  constructor(...parts) {
    super(...(parts.length > 0 ? parts : [FIXED_MS]));
  }
  static now() {
    return FIXED_MS;
  }
};
let ticks = 0;
performance.now = () => (ticks += 0.001);
let stir = 1;
const notRandom = (view) => {
  const bytes = new Uint8Array(view.buffer ?? view, view.byteOffset ?? 0, view.byteLength);
  for (let at = 0; at < bytes.length; at += 1) bytes[at] = (stir = (stir * 48271) % 0x7fffffff) & 0xff;
  return view;
};
crypto.randomFillSync = notRandom;
crypto.webcrypto.getRandomValues = notRandom;
globalThis.crypto.getRandomValues = notRandom;
process.argv = [process.argv[0], "/beadwright"];

const pyodide = await loadPyodide({
  indexURL: job.runtime,
  stdLibURL: job.stdlib,
  lockFileContents: readFileSync(job.lock, "utf8"),
  _makeSnapshot: true,
  env: { HOME: "/home/pyodide", PYTHONHASHSEED: "0", LANG: "C.UTF-8", TZ: "UTC" },
});
// Files are written as bytes and unpacked in Python: no object of JavaScript may leak into the memory.
job.wheels.forEach((wheel, index) => pyodide.FS.writeFile(`/tmp/w${index}.zip`, readFileSync(wheel)));
pyodide.FS.writeFile("/tmp/demo.json", readFileSync(job.demo));
const said = pyodide.runPython(readFileSync(new URL("./python/warm.py", import.meta.url), "utf8"));
const memory = pyodide.makeMemorySnapshot();
// Zeros at the end need no file: the restored memory is made as long as this one and starts as zeros.
let length = memory.length;
while (length > 0 && memory[length - 1] === 0) length -= 1;
length = Math.min(memory.length, Math.ceil(length / 65536) * 65536);
writeFileSync(job.target, memory.subarray(0, length));
process.stdout.write(JSON.stringify({ said, heapBytes: pyodide._module.HEAP8.length }));
process.exit(0);
