// Keeps the whole site on the phone. A module service worker at the site's root; the page registers it with {type: "module"} and hears
//   {type: "precache", build, done, total, bytes}   while a version is being stored (bytes: stored so far)
//   {type: "ready", build}                          when every byte of a version is stored and its hash was checked
//   {type: "failed", build, message}                when storing stopped; the browser tries again at a later visit
// and may send {type: "status"}, answered with "ready" where it holds.
//
// A new version waits until every tab of the old one is closed: it never skips waiting.

import { BUILD } from "./precache.js";
import { complete, removeOlder, storeAll } from "./precache_store.js";
import { answer } from "./respond.js";

const worker = /** @type {ServiceWorkerGlobalScope} */ (/** @type {unknown} */ (self));

/** @param {{type: string, [key: string]: unknown}} message */
async function tell(message) {
  const pages = await worker.clients.matchAll({ type: "window", includeUncontrolled: true });
  for (const page of pages) page.postMessage({ ...message, build: BUILD });
}

async function install() {
  try {
    await storeAll((progress) => tell({ type: "precache", ...progress }));
  } catch (error) {
    await tell({ type: "failed", message: String(error) });
    throw error;
  }
  await tell({ type: "ready" });
}

async function activate() {
  await removeOlder();
  // The very first version takes over the page that fetched it, so that its engine can be started again with no network. A later version
  // activates only when no page of the old one is left, so there is nothing to take from it.
  await worker.clients.claim();
}

worker.addEventListener("install", (event) => event.waitUntil(install()));
worker.addEventListener("activate", (event) => event.waitUntil(activate()));
worker.addEventListener("fetch", (event) => {
  const response = answer(event.request);
  if (response) event.respondWith(response);
});
worker.addEventListener("message", (event) => {
  if (event.data?.type !== "status") return;
  event.waitUntil(complete().then((whole) => whole && event.source?.postMessage({ type: "ready", build: BUILD })));
});
