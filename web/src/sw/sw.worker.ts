// The service worker: one content-addressed cache, filled all or nothing.
//
// The build writes every file's hash into this script. Each fetch carries its hash, so a wrong
// byte can be neither stored nor shown. A new version waits until the page says so.

export {};
const worker = self as unknown as ServiceWorkerGlobalScope;
declare const __FILES__: { url: string; hash: string; bytes: number }[];
declare const __VERSION__: string;

interface Listed {
  url: string;
  hash: string;
  bytes: number;
}

const CACHE_NAME = "beadwright-files";
const AT_ONCE = 4;
const HASHED_NAME = /-[0-9a-f]{8}\.|(^|\/)(py|packages|snapshot)\//;

const scope = new URL(worker.registration.scope);
const addressOf = (file: Listed): string => new URL(file.url, scope).href;
// A hashed name is its own key; index.html and its like get their hash as part of the key, so
// that the old and the new version can lie side by side.
const keyOf = (file: Listed): string => (HASHED_NAME.test(file.url) ? addressOf(file) : `${addressOf(file)}?is=${encodeURIComponent(file.hash)}`);
const byAddress = new Map(__FILES__.map((file) => [addressOf(file), file]));
const totalBytes = __FILES__.reduce((sum, file) => sum + file.bytes, 0);

async function tellPages(message: unknown): Promise<void> {
  for (const client of await worker.clients.matchAll({ type: "window", includeUncontrolled: true })) client.postMessage(message);
}

async function fetchExactly(file: Listed): Promise<Response> {
  const response = await fetch(addressOf(file), { integrity: file.hash, credentials: "same-origin", cache: HASHED_NAME.test(file.url) ? "default" : "no-cache" });
  if (!response.ok || response.redirected) throw new Error(`${file.url}: ${response.status}`);
  return response;
}

/** Store every listed file that is not stored yet; the first failure ends it. */
async function fill(files: Listed[], purpose: "install" | "repair"): Promise<void> {
  const cache = await caches.open(CACHE_NAME);
  let done = totalBytes - files.reduce((sum, file) => sum + file.bytes, 0);
  const queue = [...files];
  const tell = (): Promise<void> => tellPages({ type: "progress", purpose, version: __VERSION__, done, total: totalBytes });
  const work = async (): Promise<void> => {
    for (let file = queue.shift(); file; file = queue.shift()) {
      const isThere = await cache.match(keyOf(file));
      if (!isThere) await cache.put(keyOf(file), await fetchExactly(file));
      done += file.bytes;
      await tell();
    }
  };
  const workers = Array.from({ length: AT_ONCE }, async () => {
    try {
      await work();
    } catch (error) {
      queue.length = 0;
      throw error;
    }
  });
  const results = await Promise.allSettled(workers);
  const failed = results.find((result) => result.status === "rejected");
  if (failed) {
    const reason = failed.reason instanceof Error ? failed.reason.message : String(failed.reason);
    await tellPages({ type: "broken", purpose, version: __VERSION__, reason });
    throw failed.reason;
  }
}

async function isExact(file: Listed, response: Response): Promise<boolean> {
  const digest = new Uint8Array(await crypto.subtle.digest("SHA-256", await response.arrayBuffer()));
  return file.hash === `sha256-${btoa(String.fromCharCode(...digest))}`;
}

/** What is stored, what is missing and, after a deep look, what is damaged. */
async function check(isDeep: boolean): Promise<{ version: string; total: number; present: number; bytes: number; missing: string[]; damaged: string[] }> {
  const cache = await caches.open(CACHE_NAME);
  const missing: string[] = [];
  const damaged: string[] = [];
  for (const file of __FILES__) {
    const response = await cache.match(keyOf(file));
    if (!response) missing.push(file.url);
    else if (isDeep && !(await isExact(file, response))) damaged.push(file.url);
  }
  return { version: __VERSION__, total: __FILES__.length, present: __FILES__.length - missing.length - damaged.length, bytes: totalBytes, missing, damaged };
}

async function repair(): Promise<void> {
  const cache = await caches.open(CACHE_NAME);
  const found = await check(true);
  const wanted = new Set([...found.missing, ...found.damaged]);
  const files = __FILES__.filter((file) => wanted.has(file.url));
  for (const file of files) await cache.delete(keyOf(file));
  await fill(files, "repair");
}

/** Files of older versions go only once this one is in charge. */
async function tidy(): Promise<void> {
  const cache = await caches.open(CACHE_NAME);
  const wanted = new Set(__FILES__.map(keyOf));
  for (const request of await cache.keys()) if (!wanted.has(request.url)) await cache.delete(request);
}

function fileFor(request: Request): Listed | undefined {
  const url = new URL(request.url);
  if (request.method !== "GET" || url.origin !== scope.origin) return undefined;
  url.search = "";
  url.hash = "";
  if (url.href === scope.href) url.href = new URL("index.html", scope).href;
  return byAddress.get(url.href);
}

async function serve(file: Listed): Promise<Response> {
  const cache = await caches.open(CACHE_NAME);
  const response = await cache.match(keyOf(file));
  if (response) return response;
  try {
    const fetched = await fetchExactly(file);
    await cache.put(keyOf(file), fetched.clone());
    return fetched;
  } catch {
    // Evicted and no network: say what is missing instead of hanging.
    void tellPages({ type: "broken", purpose: "serve", version: __VERSION__, reason: `${file.url} is missing on this device and cannot be fetched` });
    return new Response(`Missing on this device: ${file.url}. Connect once and open the app again.`, { status: 504, headers: { "content-type": "text/plain; charset=utf-8" } });
  }
}

worker.addEventListener("install", (event) => event.waitUntil(fill(__FILES__, "install")));

worker.addEventListener("activate", (event) => event.waitUntil(tidy().then(() => worker.clients.claim())));

worker.addEventListener("fetch", (event) => {
  const file = fileFor(event.request);
  if (file) event.respondWith(serve(file));
});

worker.addEventListener("message", (event) => {
  const reply = (answer: unknown): void => event.ports[0]?.postMessage(answer);
  const run = async (): Promise<void> => {
    const { type, deep } = event.data as { type: string; deep?: boolean };
    try {
      if (type === "check") reply(await check(deep === true));
      else if (type === "repair") {
        await repair();
        reply(await check(true));
      } else if (type === "take-over") {
        await worker.skipWaiting();
        reply({ version: __VERSION__ });
      }
    } catch (error) {
      reply({ error: error instanceof Error ? error.message : String(error) });
    }
  };
  event.waitUntil(run());
});
