// Beadwright's build. Usage: node build/build.mjs [--shell] [--developer] [--out DIR]
//   --shell      only the shell; Python is left out (the developer way fetches it from the server)
//   --developer  allow ?core=developer in the page's address
//   --stamp TEXT goes into the app, so that two builds of one source differ (tests of updating)
//   --entry, --html  another page than the app's (tests), relative to web/
import { existsSync, mkdirSync, readFileSync, rmSync, rmdirSync, readdirSync, statSync, writeFileSync } from "node:fs";
import { join, resolve } from "node:path";
import { parseArgs } from "node:util";
import { CACHE, WEB, fail, listing, megabytes, variants, write } from "./files.mjs";

const [major] = process.versions.node.split(".").map(Number);
if (major < 20) fail(`Node 20 or newer is needed; this is ${process.version}.`);
if (!existsSync(join(WEB, "node_modules", "esbuild"))) fail("web/node_modules is missing: run 'npm ci' in web/ first (demo/start.py does it for you).");

const { values: options } = parseArgs({
  options: {
    shell: { type: "boolean", default: false }, developer: { type: "boolean", default: false }, quiet: { type: "boolean", default: false },
    out: { type: "string", default: join(WEB, "dist") }, stamp: { type: "string", default: "" }, entry: { type: "string" }, html: { type: "string" },
  },
});

// One build at a time: two of them would pull the cache from under each other.
const lock = join(CACHE, "lock");
mkdirSync(CACHE, { recursive: true });
for (;;) {
  try {
    writeFileSync(lock, String(process.pid), { flag: "wx" });
    break;
  } catch {
    const owner = Number(existsSync(lock) ? readFileSync(lock, "utf8") : 0);
    try {
      if (owner > 0) process.kill(owner, 0); // signal 0 only asks whether it lives
      await new Promise((resolve) => setTimeout(resolve, 200));
    } catch {
      rmSync(lock, { force: true });
    }
  }
}
process.on("exit", () => rmSync(lock, { force: true }));
for (const signal of ["SIGINT", "SIGTERM"]) process.on(signal, () => process.exit(1));

const started = Date.now();
const { buildRuntime, buildStatic, fetchWheels, findPython } = await import("./runtime.mjs");
const { buildServiceWorker, buildShell } = await import("./shell.mjs");
const out = resolve(options.out);

const runtime = options.shell ? null : buildRuntime();
const still = runtime ? runtime.still : buildStatic(findPython());
if (options.developer) fetchWheels(findPython());
const shell = await buildShell(runtime, options);

const files = new Map([...shell, ...(runtime?.files ?? [])]);
for (const name of listing(join(still, "site"))) files.set(name, readFileSync(join(still, "site", name)));
const worker = await buildServiceWorker(files);
files.set("sw.js", worker.script);

const sizes = [];
const kept = new Set();
for (const [name, data] of files) {
  write(join(out, name), data);
  kept.add(name);
  const made = await variants(name, data);
  for (const [kind, packed] of Object.entries(made)) {
    write(join(out, `${name}.${kind}`), packed);
    kept.add(`${name}.${kind}`);
  }
  sizes.push({ name, bytes: data.length, gz: made.gz?.length ?? data.length, br: made.br?.length ?? made.gz?.length ?? data.length });
}

const later = (name) => name.startsWith("snapshot/") || /\/(numpy|openpyxl|et_xmlfile|tzdata)-/.test(name);
const sum = (list) => list.reduce((total, item) => ({ bytes: total.bytes + item.bytes, gz: total.gz + item.gz, br: total.br + item.br }), { bytes: 0, gz: 0, br: 0 });
const report = { version: worker.version, before_first_verdict: sum(sizes.filter((item) => !later(item.name))), all: sum(sizes), files: sizes.sort((a, b) => b.br - a.br) };
write(join(out, "sizes.json"), `${JSON.stringify(report, null, 1)}\n`);
kept.add("sizes.json");

mkdirSync(out, { recursive: true });
for (const name of listing(out)) if (!kept.has(name)) rmSync(join(out, name));
for (const name of readdirSync(out, { recursive: true }).sort().reverse()) {
  const path = join(out, name);
  if (statSync(path).isDirectory() && readdirSync(path).length === 0) rmdirSync(path);
}

if (!options.quiet) {
  const line = ({ bytes, gz, br }) => `${megabytes(bytes)} (gzip ${megabytes(gz)}, brotli ${megabytes(br)})`;
  process.stdout.write(`build: ${files.size} files, version ${worker.version}, in ${((Date.now() - started) / 1000).toFixed(1)} s\n`);
  process.stdout.write(`build: before the first verdict ${line(report.before_first_verdict)}; all that offline needs ${line(report.all)}\n`);
}
