// The stored copy of one version: one cache, named by its build, filled only with bytes whose hash was checked.

import { BUILD, FILES } from "./precache.js";

const PREFIX = "strayline ";
const SCOPE = new URL("./", import.meta.url);

/** The cache of this version. */
export const CACHE = `${PREFIX}${BUILD}`;

/** @param {string} path @returns {string} */
export const address = (path) => new URL(path, SCOPE).href;

/** @param {ArrayBuffer} bytes @returns {Promise<string>} lower-case hexadecimal */
async function sha256(bytes) {
  const digest = await crypto.subtle.digest("SHA-256", bytes);
  return Array.from(new Uint8Array(digest), (byte) => byte.toString(16).padStart(2, "0")).join("");
}

/** @param {Cache} cache @param {string} path @param {string} expected */
async function store(cache, path, expected) {
  // Only checked bytes are ever put here, so an install that was interrupted goes on where it stopped.
  if (await cache.match(address(path))) return;
  // "reload" goes past the HTTP cache: a copy there may belong to an older version.
  const response = await fetch(address(path), { cache: "reload" });
  if (!response.ok) throw new Error(`${path}: status ${response.status}`);
  const bytes = await response.arrayBuffer();
  if ((await sha256(bytes)) !== expected) throw new Error(`${path}: not the bytes of this version`);
  await cache.put(address(path), new Response(bytes, { headers: response.headers }));
}

/**
 * Fetch, check and store every file.
 *
 * @param {(progress: {done: number, total: number, bytes: number}) => unknown} report
 */
export async function storeAll(report) {
  const cache = await caches.open(CACHE);
  let done = 0;
  let bytes = 0;
  for (const [path, hash, size] of FILES) {
    await store(cache, path, hash);
    done += 1;
    bytes += size;
    report({ done, total: FILES.length, bytes });
  }
}

/** Whether every file of this version is stored. Each was checked when it was put there. */
export async function complete() {
  const cache = await caches.open(CACHE);
  const stored = new Set((await cache.keys()).map((request) => request.url));
  return FILES.every(([path]) => stored.has(address(path)));
}

/** Drop the caches of other versions. */
export async function removeOlder() {
  for (const name of await caches.keys()) if (name.startsWith(PREFIX) && name !== CACHE) await caches.delete(name);
}
