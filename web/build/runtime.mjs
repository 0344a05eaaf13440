// The Python half of the build: library and packages as bytecode, our own lock, the snapshot.
// Each stage is keyed by a hash over its inputs and kept in web/.cache, so that an unchanged
// stage costs nothing.
import { execFileSync, spawnSync } from "node:child_process";
import { copyFileSync, existsSync, mkdirSync, readdirSync, readFileSync, renameSync, rmSync, writeFileSync } from "node:fs";
import { join } from "node:path";
import { gunzipSync, gzipSync } from "node:zlib";
import { CACHE, ROOT, WEB, fail, hashOf, listing, sha256, short, write } from "./files.mjs";

const PYODIDE = join(WEB, "node_modules", "pyodide");
const BUILD = join(WEB, "build");
const RUNTIME_FILES = ["pyodide.mjs", "pyodide.asm.mjs", "pyodide.asm.wasm", "python_stdlib.zip"];
const OWN_OPTIMIZE = 2; // our docstrings are for readers of the source: a third of the wheel
const SITE = "/lib/python3.14/site-packages/";

const node = (script, job, folder) => {
  const file = join(folder, `${script}.job.json`);
  writeFileSync(file, JSON.stringify(job));
  return run(process.execPath, ["--no-warnings", join(BUILD, script), file], script);
};

// Node quotes the line that threw, and a bundled loader is one line of a megabyte.
const readable = (text) => text.split("\n").map((line) => (line.length > 300 ? `${line.slice(0, 120)} …` : line)).filter((line) => line.trim()).slice(-40).join("\n");

/** Run a child quietly; its words are shown only when it fails. */
function run(program, args, what) {
  const done = spawnSync(program, args, { encoding: "utf8", stdio: ["ignore", "pipe", "pipe"], maxBuffer: 1e8 });
  if (done.status !== 0) fail(`${what} failed.\n${readable(done.stderr || String(done.error ?? "") || done.stdout)}`);
  return done.stdout.trim();
}

/** Make `folder` by `fill` unless a finished one is there; older ones of the same stage go away. */
function stage(name, key, fill) {
  const folder = join(CACHE, `${name}-${key}`);
  if (existsSync(join(folder, "done"))) return folder;
  const started = Date.now();
  process.stdout.write(`build: ${name} …\n`);
  mkdirSync(CACHE, { recursive: true });
  for (const old of readdirSync(CACHE)) if (old.startsWith(`${name}-`)) rmSync(join(CACHE, old), { recursive: true, force: true });
  const beside = `${folder}.part`;
  mkdirSync(beside, { recursive: true });
  fill(beside);
  writeFileSync(join(beside, "done"), "");
  renameSync(beside, folder);
  process.stdout.write(`build: ${name} done in ${((Date.now() - started) / 1000).toFixed(1)} s\n`);
  return folder;
}

/** The Python of this machine that has the core's packages: $BEADWRIGHT_PYTHON, .venv, python3. */
export function findPython() {
  const own = [join(ROOT, ".venv", "bin", "python"), join(ROOT, ".venv", "Scripts", "python.exe")].filter(existsSync);
  const tried = [process.env.BEADWRIGHT_PYTHON, ...own, "python3"].filter(Boolean);
  for (const python of tried) {
    try {
      execFileSync(python, ["-c", "import pint, attrs, cattrs, pip"], { stdio: "ignore" });
      return python;
    } catch {
      continue;
    }
  }
  return fail(`no Python with pint, attrs and cattrs was found (tried ${tried.join(", ")}). Run 'python3 demo/start.py', which sets one up.`);
}

export function pyodideVersion() {
  return JSON.parse(readFileSync(join(PYODIDE, "package.json"), "utf8")).version;
}

/** numpy's wheel, after its hash was found equal to the one in Pyodide's own lock file. */
function checkedNumpy(lock) {
  const folder = join(WEB, "vendor", "numpy");
  const name = readdirSync(folder).find((file) => file.endsWith(".whl"));
  const have = sha256(readFileSync(join(folder, name)));
  const want = lock.packages.numpy.sha256;
  if (have !== want || name !== lock.packages.numpy.file_name) {
    fail(`web/vendor/numpy/${name} has sha256 ${have}, but pyodide ${pyodideVersion()} expects ${lock.packages.numpy.file_name} with ${want}.`);
  }
  return { name: "numpy", version: lock.packages.numpy.version, file: join(folder, name), base: name, depends: [], imports: ["numpy"] };
}

/** The pure wheels of vendor/wheels.txt, fetched once with their hashes enforced. */
function pureWheels(python) {
  const list = join(WEB, "vendor", "wheels.txt");
  const forDevelopers = join(WEB, "vendor", "wheels-developer.txt");
  const folder = stage("wheels", hashOf([list, forDevelopers]), (out) => {
    run(python, ["-m", "pip", "download", "--quiet", "--disable-pip-version-check", "--no-deps", "--require-hashes", "--only-binary=:all:", "--python-version", "3.14", "-d", out, "-r", list, "-r", forDevelopers], "fetching the wheels of web/vendor");
  });
  const pinned = readFileSync(list, "utf8").matchAll(/^([\w-]+)==(\S+)\s+--hash=sha256:(\w+)$/gm);
  return [...pinned].map(([, name, version, hash]) => {
    const base = readdirSync(folder).find((file) => file.toLowerCase().startsWith(`${name.toLowerCase()}-${version}-`));
    if (!base || sha256(readFileSync(join(folder, base))) !== hash) fail(`the wheel of ${name} ${version} is missing or is not the pinned file. Delete web/.cache and build again.`);
    return { name: name.toLowerCase().replaceAll("_", "-"), version, file: join(folder, base), base };
  });
}

const DEPENDS = { pint: ["flexcache", "flexparser", "platformdirs", "typing-extensions"], cattrs: ["attrs", "typing-extensions"], flexparser: ["typing-extensions"], flexcache: ["typing-extensions"], openpyxl: ["et-xmlfile"] };
const IMPORTS = { attrs: ["attr", "attrs"], "typing-extensions": ["typing_extensions"], "et-xmlfile": ["et_xmlfile"] };
const FROM_CORE = { pint: /^\s*(import|from) pint\b/m, attrs: /^\s*(import|from) attrs?\b/m, cattrs: /^\s*(import|from) cattrs\b/m, openpyxl: /^\s*(import|from) openpyxl\b/m, tzdata: /^\s*(import|from) zoneinfo\b/m };
// Loaded by the worker when first needed (bridge.py names them): no start waits for these, and no snapshot holds them.
const LATE = ["numpy", "openpyxl", "et-xmlfile", "tzdata"];

/** Only what the core imports travels to the browser, with what that needs in turn. */
function neededBy(sources) {
  const text = sources.map((file) => readFileSync(file, "utf8")).join("\n");
  const direct = Object.keys(FROM_CORE).filter((name) => FROM_CORE[name].test(text));
  const all = new Set();
  const add = (name) => {
    if (all.has(name)) return;
    all.add(name);
    (DEPENDS[name] ?? []).forEach(add);
  };
  direct.forEach(add);
  return { direct, all: [...all].sort() };
}

const coreSources = () => listing(join(ROOT, "pycore", "beadwright"), (name) => /\.(py|json|txt|typed)$/.test(name)).map((name) => join(ROOT, "pycore", "beadwright", name));
export const demoJobs = () => listing(join(ROOT, "demo"), (name) => name.endsWith(".beadwright.json")).map((name) => join(ROOT, "demo", name));

/** forms.json, the blank jobs and the demo jobs, written by CPython from the same sources. */
export function buildStatic(python) {
  const script = join(BUILD, "python", "static.py");
  return stage("static", hashOf([script, ...coreSources(), ...demoJobs()]), (out) => {
    run(python, [script, out], "writing the forms and demo jobs");
  });
}

/** The wheels alone, for the developer way. */
export const fetchWheels = (python) => void pureWheels(python);

export function buildRuntime() {
  const python = findPython();
  const theirs = JSON.parse(readFileSync(join(PYODIDE, "pyodide-lock.json"), "utf8"));
  const numpy = checkedNumpy(theirs);
  const pure = pureWheels(python);
  const still = buildStatic(python);
  const bridge = join(WEB, "src", "core", "bridge.py");
  const compiler = [join(BUILD, "compile_python.mjs"), join(BUILD, "python", "compile_zip.py")];

  const library = stage("library", hashOf([...compiler, ...RUNTIME_FILES.map((name) => join(PYODIDE, name)), numpy.file, ...pure.map((wheel) => wheel.file)]), (out) => {
    const jobs = [{ source: join(PYODIDE, "python_stdlib.zip"), target: join(out, "python_stdlib.zip"), prefix: "/lib/python314.zip/", optimize: 2, wheel: false }];
    for (const wheel of [numpy, ...pure]) jobs.push({ source: wheel.file, target: join(out, wheel.base), prefix: SITE, optimize: 0, wheel: true });
    node("compile_python.mjs", jobs, out);
    for (const name of RUNTIME_FILES.slice(0, 3)) copyFileSync(join(PYODIDE, name), join(out, name));
  });

  const own = stage("core", hashOf([...compiler, join(BUILD, "python", "own_wheel.py"), bridge, join(ROOT, "pyproject.toml"), join(ROOT, "LICENSE"), ...coreSources()]), (out) => {
    const base = run(python, [join(BUILD, "python", "own_wheel.py"), join(out, "source")], "making the core's wheel");
    node("compile_python.mjs", [{ source: join(out, "source", base), target: join(out, base), prefix: SITE, optimize: OWN_OPTIMIZE, wheel: true }], out);
  });
  const ownBase = readdirSync(own).find((name) => name.endsWith(".whl"));
  const coreVersion = ownBase.split("-")[1];

  const needed = neededBy(coreSources().filter((file) => file.endsWith(".py")));
  const packages = [
    ...pure.filter((wheel) => needed.all.includes(wheel.name)).map((wheel) => ({ ...wheel, file: join(library, wheel.base), depends: DEPENDS[wheel.name] ?? [], imports: IMPORTS[wheel.name] ?? [wheel.name] })),
    { ...numpy, file: join(library, numpy.base) },
    { name: "beadwright", version: coreVersion, file: join(own, ownBase), base: ownBase, depends: needed.direct.filter((name) => !LATE.includes(name)), imports: ["beadwright", "beadwright_bridge"] },
  ].map((item) => ({ ...item, data: readFileSync(item.file) }));

  const lock = { info: theirs.info, packages: {} };
  for (const item of packages) {
    lock.packages[item.name] = {
      name: item.name, version: item.version, file_name: `${short(item.data)}/${item.base}`, install_dir: "site",
      sha256: sha256(item.data), package_type: "package", imports: item.imports, depends: item.depends, unvendored_tests: false,
    };
  }

  const runtimeHash = hashOf(RUNTIME_FILES.map((name) => join(library, name)));
  const demo = join(still, "first.json");
  const lockText = JSON.stringify(lock);
  const scripts = ["make_snapshot.mjs", "check_restore.mjs", "python/warm.py"].map((name) => join(BUILD, name));
  const memory = stage("snapshot", short(runtimeHash + lockText + hashOf([...scripts, demo])), (out) => {
    const runtime = join(out, "runtime");
    mkdirSync(runtime);
    for (const name of RUNTIME_FILES) copyFileSync(join(library, name), join(runtime, name));
    for (const item of packages) write(join(runtime, "packages", short(item.data), item.base), item.data);
    const lockFile = join(out, "lock.json");
    writeFileSync(lockFile, lockText);
    const raw = join(out, "snapshot.bin");
    const common = { runtime: `${runtime}/`, stdlib: join(runtime, "python_stdlib.zip"), demo };
    const { said, heapBytes } = JSON.parse(node("make_snapshot.mjs", { ...common, lock: lockFile, wheels: packages.filter((item) => !LATE.includes(item.name)).map((item) => item.file), target: raw }, out));
    const checked = node("check_restore.mjs", { ...common, lock: lockFile, packages: `${join(runtime, "packages")}/`, snapshot: raw, heapBytes }, out);
    process.stdout.write(`build: snapshot of ${said}; ${checked}\n`);
    const bytes = readFileSync(raw);
    const packed = gzipSync(bytes, { level: 9 });
    if (!gunzipSync(packed).equals(bytes)) fail("the snapshot does not survive its own compression.");
    write(join(out, "snapshot.bin.gz"), packed);
    writeFileSync(join(out, "raw.json"), JSON.stringify({ rawBytes: bytes.length, heapBytes }));
    rmSync(raw);
    rmSync(runtime, { recursive: true });
  });

  const files = new Map();
  const base = `py/${runtimeHash}/`;
  for (const name of RUNTIME_FILES) files.set(base + name, readFileSync(join(library, name)));
  for (const item of packages) files.set(`packages/${lock.packages[item.name].file_name}`, item.data);
  const snapshot = readFileSync(join(memory, "snapshot.bin.gz"));
  const snapshotUrl = `snapshot/${short(snapshot)}.bin.gz`;
  files.set(snapshotUrl, snapshot);
  files.set("licences/numpy.txt", readFileSync(join(WEB, "vendor", "numpy", "LICENSE.txt")));

  const size = (url) => ({ url, bytes: files.get(url).length });
  const first = [...RUNTIME_FILES.map((name) => base + name), ...packages.filter((item) => !LATE.includes(item.name)).map((item) => `packages/${lock.packages[item.name].file_name}`)];
  return {
    files,
    still,
    facts: {
      pyodide: pyodideVersion(), coreVersion, base, runtimeHash, packages: "packages/", lock,
      // The snapshot names the runtime that it was made on: any other is refused before it is tried.
      snapshot: { url: snapshotUrl, sha256: sha256(snapshot), bytes: snapshot.length, ...JSON.parse(readFileSync(join(memory, "raw.json"), "utf8")), runtimeHash },
      first: first.map(size),
    },
  };
}
