// Child of the build: restores the snapshot just made in a fresh process and asks it the same
// question that the precompiled start answers. Both answers must be the same text.
// Usage: node check_restore.mjs JOB.json  (JOB: {runtime, stdlib, lock, packages, snapshot, heapBytes, demo})
import { readFileSync } from "node:fs";
import { loadPyodide } from "pyodide";

const job = JSON.parse(readFileSync(process.argv[2], "utf8"));
const demo = JSON.parse(readFileSync(job.demo, "utf8"));
const question = JSON.stringify([demo, (demo.joints ?? []).map((joint) => joint.id)]);
const { default: create } = await import(`${job.runtime}pyodide.asm.mjs`);
// The memory of a fresh module is smaller than a snapshot that grew: make room first (as core.worker.ts does).
const roomy = (bytes) => async (settings) => {
  const made = await create(settings);
  while (made.HEAP8.length < bytes) if (made._malloc(1 << 20) === 0) throw new Error("no memory for the snapshot");
  return made;
};
const common = { indexURL: job.runtime, stdLibURL: job.stdlib, lockFileContents: readFileSync(job.lock, "utf8"), packageBaseUrl: job.packages };

async function answer(options) {
  const started = performance.now();
  const pyodide = await loadPyodide({ ...common, ...options });
  const text = pyodide.pyimport("beadwright_bridge").call("evaluate", question);
  return { text, ms: Math.round(performance.now() - started), pyodide };
}

const bytes = readFileSync(job.snapshot);
const restored = await answer({ createPyodideModule: roomy(job.heapBytes), _loadSnapshot: bytes.buffer.slice(bytes.byteOffset, bytes.byteOffset + bytes.length) });
const ordinary = await answer({ packages: ["beadwright"], env: { HOME: "/home/pyodide" } });
if (!JSON.parse(restored.text).ok) throw new Error(`the restored snapshot fails: ${restored.text.slice(0, 2000)}`);
if (restored.text !== ordinary.text) throw new Error("the restored snapshot answers otherwise than the precompiled start");

// What the page does later: the files of the packages, then numpy and openpyxl, into the restored memory.
const failures = [];
await restored.pyodide.loadPackage(["beadwright", "numpy", "openpyxl"], { errorCallback: (text) => failures.push(text), messageCallback: () => {} });
const sum = restored.pyodide.runPython("import numpy, openpyxl, importlib.metadata; importlib.metadata.version('pint') and float(numpy.arange(5.0).sum())");
if (failures.length || sum !== 10) throw new Error(`numpy and openpyxl do not load into the restored snapshot: ${failures.join("; ")}`);
process.stdout.write(`restored in ${restored.ms} ms, precompiled ${ordinary.ms} ms, same answer, numpy and openpyxl load after it\n`);
process.exit(0);
