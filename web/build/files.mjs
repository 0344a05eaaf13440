// Small helpers of the build: hashes, listings, and compressed variants that are made once.
import { createHash } from "node:crypto";
import { existsSync, mkdirSync, readdirSync, readFileSync, renameSync, statSync, writeFileSync } from "node:fs";
import { dirname, join, relative, resolve } from "node:path";
import { fileURLToPath } from "node:url";
import { brotliCompress, constants, gzip } from "node:zlib";
import { promisify } from "node:util";

export const WEB = resolve(dirname(fileURLToPath(import.meta.url)), "..");
export const ROOT = resolve(WEB, "..");
export const CACHE = join(WEB, ".cache");

export const sha256 = (data, form = "hex") => createHash("sha256").update(data).digest(form);
export const short = (data) => sha256(data).slice(0, 12);
export const integrity = (data) => `sha256-${sha256(data, "base64")}`;

/** Every file under `folder`, sorted, as paths relative to it with forward slashes. */
export function listing(folder, keep = () => true) {
  if (!existsSync(folder)) return [];
  return readdirSync(folder, { recursive: true, withFileTypes: true })
    .filter((entry) => entry.isFile())
    .map((entry) => relative(folder, join(entry.parentPath ?? entry.path, entry.name)).replaceAll("\\", "/"))
    .filter((name) => !name.includes("__pycache__") && keep(name))
    .sort();
}

/** One hash over names and contents, so that unchanged inputs are recognised. */
export function hashOf(files) {
  const hash = createHash("sha256");
  for (const file of files) {
    const data = readFileSync(file);
    hash.update(`${relative(ROOT, file)}\0${data.length}\0`).update(data);
  }
  return hash.digest("hex").slice(0, 16);
}

/** Write only what changed, by way of a second name, so that a reader never sees half a file. */
export function write(file, data) {
  const bytes = typeof data === "string" ? Buffer.from(data, "utf8") : data;
  if (existsSync(file) && statSync(file).size === bytes.length && readFileSync(file).equals(bytes)) return;
  mkdirSync(dirname(file), { recursive: true });
  const beside = `${file}.part`;
  writeFileSync(beside, bytes);
  renameSync(beside, file);
}

const FAST_TEXT = /\.(html|js|mjs|css|json|svg|webmanifest|txt)$/;
const run = { br: promisify(brotliCompress), gz: promisify(gzip) };

/** `{br, gz}` of a file's bytes, kept by content; null where compression does not pay. */
export async function variants(name, data) {
  if (data.length < 512 || /\.(gz|png|woff2|jpg)$/.test(name)) return {};
  const folder = join(CACHE, "compressed");
  mkdirSync(folder, { recursive: true });
  const key = sha256(data).slice(0, 32);
  const made = {};
  for (const kind of ["br", "gz"]) {
    const kept = join(folder, `${key}.${kind}`);
    if (!existsSync(kept)) {
      const options =
        kind === "br"
          ? {
              params: {
                [constants.BROTLI_PARAM_QUALITY]: data.length > 4e6 ? 9 : 11,
                [constants.BROTLI_PARAM_LGWIN]: 24,
                [constants.BROTLI_PARAM_SIZE_HINT]: data.length,
                [constants.BROTLI_PARAM_MODE]: FAST_TEXT.test(name) ? constants.BROTLI_MODE_TEXT : constants.BROTLI_MODE_GENERIC,
              },
            }
          : { level: 9 };
      write(kept, await run[kind](data, options));
    }
    const packed = readFileSync(kept);
    if (packed.length < data.length * 0.97) made[kind] = packed;
  }
  return made;
}

export const megabytes = (count) => `${(count / 1e6).toFixed(2)} MB`;

export function fail(sentence) {
  process.stderr.write(`\nbuild: ${sentence}\n`);
  process.exit(1);
}
