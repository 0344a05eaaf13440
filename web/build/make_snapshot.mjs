// Child of the build: boots Pyodide on our compiled library, unpacks the pure packages, imports
// all of the core, answers every kind of question once, and writes the memory as it then is.
// Usage: node make_snapshot.mjs JOB.json  (JOB: {runtime, stdlib, wheels[], demo, target})
import { readFileSync, writeFileSync } from "node:fs";
import { loadPyodide } from "pyodide";

const job = JSON.parse(readFileSync(process.argv[2], "utf8"));
const pyodide = await loadPyodide({
  indexURL: job.runtime,
  stdLibURL: job.stdlib,
  _makeSnapshot: true,
  env: { HOME: "/home/pyodide", PYTHONHASHSEED: "0", LANG: "C.UTF-8", TZ: "UTC" },
});
// Files are written as bytes and unpacked in Python: no object of JavaScript may leak into the memory.
job.wheels.forEach((wheel, index) => pyodide.FS.writeFile(`/tmp/w${index}.zip`, readFileSync(wheel)));
pyodide.FS.writeFile("/tmp/demo.json", readFileSync(job.demo));
const said = pyodide.runPython(readFileSync(new URL("./python/warm.py", import.meta.url), "utf8"));
writeFileSync(job.target, pyodide.makeMemorySnapshot());
process.stdout.write(`${said}\n`);
process.exit(0);
