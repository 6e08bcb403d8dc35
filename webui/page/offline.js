/** Makes the page work with no network, and says how far that is. */
import { scriptURL } from "../trusted.js";
import { word } from "./static.js";

/** @param {string} state @param {string} text */
function say(state, text) {
  const line = /** @type {HTMLElement} */ (document.getElementById("offline"));
  line.dataset.state = state;
  line.textContent = text;
}

/** @param {{type: string, [key: string]: any}} message from the service worker; its list stands in service_worker.js */
function hear(message) {
  if (message.type === "ready") say("ready", word("offline_ready"));
  if (message.type === "precache") {
    say("getting", word("offline_getting").replace("{done}", String(message.done)).replace("{total}", String(message.total)));
  }
  if (message.type === "failed") say("never", word("offline_failed"));
}

export async function goOffline() {
  if (!("serviceWorker" in navigator)) return say("never", word("offline_never"));
  navigator.serviceWorker.addEventListener("message", ({ data }) => hear(data));
  navigator.serviceWorker.startMessages();
  try {
    const registration = await navigator.serviceWorker.register(scriptURL("service_worker.js"), { type: "module" });
    // A version stored on an earlier visit says nothing by itself.
    registration.active?.postMessage({ type: "status" });
    if (registration.waiting && registration.active) say("ready", word("update_ready"));
  } catch (error) {
    console.warn("service worker", error);
    say("never", word("offline_never"));
  }
}
