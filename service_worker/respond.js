// What a request gets: the stored bytes of this version, the network only for what the version does not hold.

import { FILES } from "./precache.js";
import { address, CACHE } from "./precache_store.js";

const HELD = new Set(FILES.map(([path]) => address(path)));
const START = address("index.html");

/**
 * @param {Request} request
 * @returns {Promise<Response> | null} null leaves the request to the browser
 */
export function answer(request) {
  if (request.method !== "GET") return null;
  // A query is not part of the name of a file of ours, but only for the page itself may it be ignored: a script keeps its own.
  const url = request.mode === "navigate" ? page(request.url) : request.url;
  return HELD.has(url) ? stored(url, request) : null;
}

/** @param {string} url @returns {string} the file that a navigation shows */
function page(url) {
  const bare = url.split(/[?#]/, 1)[0] ?? url;
  return bare === address("") ? START : bare;
}

/** @param {string} url @param {Request} request */
async function stored(url, request) {
  const cache = await caches.open(CACHE);
  // The browser may have thrown a file away to make room; the network is then the only source left.
  return (await cache.match(url)) ?? fetch(request);
}
