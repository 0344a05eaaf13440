// The TypeScript half of the build: bundles with hashed names, page, manifest, service worker.
import { existsSync, readFileSync } from "node:fs";
import { basename, join } from "node:path";
import { build } from "esbuild";
import { WEB, fail, integrity, short } from "./files.mjs";

const COMMON = {
  bundle: true, write: false, format: "esm", target: ["es2022", "chrome109", "firefox115", "safari16.4"],
  minify: true, legalComments: "linked", charset: "utf8", logLevel: "warning", absWorkingDir: WEB,
};

async function bundle(entry, define, options = {}) {
  const made = await build({ ...COMMON, entryPoints: [entry], outdir: "out", define, ...options }).catch(() => fail(`the bundle of ${basename(entry)} failed; the messages above say where.`));
  return made.outputFiles.map((file) => ({ name: basename(file.path), data: Buffer.from(file.contents) }));
}

/** Bundle one entry under a hashed name; returns that name. Licence comments travel beside it. */
async function hashed(files, entry, stem, extension, define, options) {
  const parts = await bundle(entry, define, options);
  const main = parts.find((part) => part.name.endsWith(extension));
  const name = `${stem}-${short(main.data).slice(0, 8)}${extension}`;
  // esbuild names its legal-comment file after the entry: point at the one beside the hashed name
  const legal = parts.find((part) => part.name.endsWith(".LEGAL.txt"));
  if (legal) files.set(`licences/${stem}.txt`, legal.data);
  files.set(name, legal ? Buffer.from(main.data.toString("utf8").replace(/\/\*! For license information[^*]*\*\/\s*/, `/* licences: licences/${stem}.txt */\n`)) : main.data);
  return name;
}

const MANIFEST = {
  name: "Beadwright", short_name: "Beadwright", description: "Sizes and checks building sealant joints, offline.",
  id: "./", start_url: "./", scope: "./", display: "standalone", background_color: "#f6f3ea", theme_color: "#f6f3ea",
  icons: [{ src: "icon.svg", sizes: "any", type: "image/svg+xml", purpose: "any" }],
};

// Our own drawing: two slabs, the bead between them with its tooled face, the rod behind it.
const ICON = `<svg xmlns="http://www.w3.org/2000/svg" viewBox="0 0 96 96"><rect width="96" height="96" rx="14" fill="#f6f3ea"/><g fill="none" stroke="#1d2733" stroke-width="3"><path fill="#d9d3c3" d="M10 18h24v60H10zM62 18h24v60H62z"/><circle cx="48" cy="61" r="14" fill="#fff"/><path fill="#b4531f" d="M34 24q14 9 28 0v28q-14-10-28 0z"/></g></svg>\n`;

function page(html, names, policy) {
  const swaps = [
    [/<script[^>]*\bsrc="[^"]*\.ts"[^>]*>\s*<\/script>/, `<script type="module" src="${names.app}"></script>`],
    [/<link[^>]*\brel="stylesheet"[^>]*>/, names.css ? `<link rel="stylesheet" href="${names.css}">` : ""],
  ];
  let out = html;
  for (const [pattern, text] of swaps) out = out.replace(pattern, text);
  if (!out.includes(names.app)) fail("web/index.html has no <script type=\"module\" src=\"src/app/main.ts\"></script> to replace.");
  const head = [
    `<meta http-equiv="Content-Security-Policy" content="${policy}">`,
    /rel="manifest"/.test(out) ? "" : `<link rel="manifest" href="manifest.webmanifest">`,
    /rel="icon"/.test(out) ? "" : `<link rel="icon" href="icon.svg" type="image/svg+xml">`,
  ].join("");
  // The policy stands first after the character set, so that nothing loads before it.
  if (!/<meta charset="[^"]*"\s*\/?>/i.test(out)) fail("web/index.html lacks <meta charset=\"utf-8\">.");
  return out.replace(/<meta charset="[^"]*"\s*\/?>/i, (found) => `${found}${head}`);
}

/** All files of the shell by name. `runtime` is what buildRuntime returned, or null. */
export async function buildShell(runtime, { entry, html, stamp, developer }) {
  const files = new Map();
  const facts = runtime ? runtime.facts : null;
  const worker = await hashed(files, "src/core/core.worker.ts", "core", ".js", { __RUNTIME__: JSON.stringify(facts), __DEVELOPER__: String(developer) });
  const source = entry ?? "src/app/main.ts";
  if (!existsSync(join(WEB, source))) fail(`${source} is missing.`);
  const define = { __WORKER_URL__: JSON.stringify(worker), __DEVELOPER__: String(developer), __BUILD__: JSON.stringify({ stamp, core: facts?.coreVersion ?? null, pyodide: facts?.pyodide ?? null }) };
  const names = { app: await hashed(files, source, "app", ".js", define), css: null };
  const styles = "src/styles/main.css";
  if (!entry && existsSync(join(WEB, styles))) names.css = await hashed(files, styles, "style", ".css", {});
  const policy = readFileSync(join(WEB, "build", "csp.txt"), "utf8").trim();
  files.set("index.html", Buffer.from(page(readFileSync(join(WEB, html ?? "index.html"), "utf8"), names, policy)));
  files.set("manifest.webmanifest", Buffer.from(`${JSON.stringify(MANIFEST, null, 1)}\n`));
  files.set("icon.svg", Buffer.from(ICON));
  return files;
}

/** The service worker with the whole list of files and hashes inside; built last. */
export async function buildServiceWorker(files) {
  const list = [...files].filter(([name]) => name !== "sw.js").map(([url, data]) => ({ url, hash: integrity(data), bytes: data.length })).sort((a, b) => (a.url < b.url ? -1 : 1));
  const version = short(JSON.stringify(list));
  const parts = await bundle("src/sw/sw.worker.ts", { __FILES__: JSON.stringify(list), __VERSION__: JSON.stringify(version) }, { format: "iife" });
  return { version, list, script: parts.find((part) => part.name.endsWith(".js")).data };
}
