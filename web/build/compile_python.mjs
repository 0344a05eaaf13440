// Child of the build: boots Pyodide once and turns a list of zips and wheels into bytecode.
// Usage: node compile_python.mjs JOB.json   (JOB: [{source, target, prefix, optimize, wheel}])
import { readFileSync, writeFileSync } from "node:fs";
import { dirname, join } from "node:path";
import { fileURLToPath } from "node:url";
import { loadPyodide } from "pyodide";

const here = dirname(fileURLToPath(import.meta.url));
const jobs = JSON.parse(readFileSync(process.argv[2], "utf8"));
// Without column positions bytecode is a fifth smaller; a traceback still names the line.
const pyodide = await loadPyodide({ env: { PYTHONHASHSEED: "0", PYTHONNODEBUGRANGES: "1", HOME: "/home/pyodide" } });
pyodide.runPython(readFileSync(join(here, "python", "compile_zip.py"), "utf8"));
const repack = pyodide.globals.get("repack");

for (const job of jobs) {
  pyodide.FS.writeFile("/tmp/in.zip", readFileSync(job.source));
  repack("/tmp/in.zip", "/tmp/out.zip", job.prefix, job.optimize, job.wheel).destroy();
  writeFileSync(job.target, pyodide.FS.readFile("/tmp/out.zip"));
}
process.exit(0);
