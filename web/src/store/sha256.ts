// SHA-256 (FIPS 180-4). A synchronous one is needed: a draft that is written while the page is being hidden
// cannot wait for an answer, and crypto.subtle is absent outside secure contexts.

const ROUND = new Uint32Array(64);
const START = new Uint32Array(8);

(function fillConstants(): void {
  // Fractional parts of the cube and square roots of the first primes (FIPS 180-4, 4.2.2 and 5.3.3).
  const fraction = (root: number): number => ((root - Math.floor(root)) * 0x100000000) >>> 0;
  let found = 0;
  for (let n = 2; found < 64; n++) {
    let isPrime = true;
    for (let d = 2; d * d <= n; d++) if (n % d === 0) isPrime = false;
    if (!isPrime) continue;
    if (found < 8) START[found] = fraction(Math.sqrt(n));
    ROUND[found] = fraction(Math.cbrt(n));
    found++;
  }
})();

const HEX = Array.from({ length: 256 }, (_, byte) => byte.toString(16).padStart(2, "0"));

export function sha256Sync(bytes: Uint8Array): string {
  const blockCount = Math.ceil((bytes.length + 9) / 64);
  const tail = new Uint8Array(128);
  const wholeBlocks = Math.floor(bytes.length / 64);
  tail.set(bytes.subarray(wholeBlocks * 64));
  tail[bytes.length - wholeBlocks * 64] = 0x80;
  const tailBlocks = blockCount - wholeBlocks;
  const tailView = new DataView(tail.buffer);
  tailView.setUint32(tailBlocks * 64 - 8, Math.floor(bytes.length / 0x20000000));
  tailView.setUint32(tailBlocks * 64 - 4, (bytes.length << 3) >>> 0);

  const state = Uint32Array.from(START);
  const w = new Uint32Array(64);
  const head = new DataView(bytes.buffer, bytes.byteOffset, bytes.byteLength);
  for (let block = 0; block < wholeBlocks; block++) mix(state, w, head, block * 64);
  for (let block = 0; block < tailBlocks; block++) mix(state, w, tailView, block * 64);

  let hex = "";
  for (const word of state) {
    hex += HEX[word >>> 24]! + HEX[(word >>> 16) & 255]! + HEX[(word >>> 8) & 255]! + HEX[word & 255]!;
  }
  return hex;
}

function mix(state: Uint32Array, w: Uint32Array, view: DataView, offset: number): void {
  for (let i = 0; i < 16; i++) w[i] = view.getUint32(offset + i * 4);
  for (let i = 16; i < 64; i++) {
    const x = w[i - 15]!;
    const y = w[i - 2]!;
    const s0 = ((x >>> 7) | (x << 25)) ^ ((x >>> 18) | (x << 14)) ^ (x >>> 3);
    const s1 = ((y >>> 17) | (y << 15)) ^ ((y >>> 19) | (y << 13)) ^ (y >>> 10);
    w[i] = (w[i - 16]! + s0 + w[i - 7]! + s1) | 0;
  }
  let a = state[0]!, b = state[1]!, c = state[2]!, d = state[3]!;
  let e = state[4]!, f = state[5]!, g = state[6]!, h = state[7]!;
  for (let i = 0; i < 64; i++) {
    const s1 = ((e >>> 6) | (e << 26)) ^ ((e >>> 11) | (e << 21)) ^ ((e >>> 25) | (e << 7));
    const t1 = (h + s1 + ((e & f) ^ (~e & g)) + ROUND[i]! + w[i]!) | 0;
    const s0 = ((a >>> 2) | (a << 30)) ^ ((a >>> 13) | (a << 19)) ^ ((a >>> 22) | (a << 10));
    const t2 = (s0 + ((a & b) ^ (a & c) ^ (b & c))) | 0;
    h = g; g = f; f = e; e = (d + t1) | 0;
    d = c; c = b; b = a; a = (t1 + t2) | 0;
  }
  state[0]! += a; state[1]! += b; state[2]! += c; state[3]! += d;
  state[4]! += e; state[5]! += f; state[6]! += g; state[7]! += h;
}

/** The same answer off the main thread where the browser offers it; for pictures. */
export async function sha256(bytes: Uint8Array<ArrayBuffer>): Promise<string> {
  if (globalThis.crypto?.subtle === undefined) return sha256Sync(bytes);
  const digest = new Uint8Array(await crypto.subtle.digest("SHA-256", bytes));
  let hex = "";
  for (const byte of digest) hex += HEX[byte]!;
  return hex;
}
