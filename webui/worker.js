// Runs Python. Only strings cross: a request's text in, a reply's text out. Nothing is kept between requests.

// @ts-expect-error the build puts the runtime beside this file; its types are not worth a copy for one call
import { loadPyodide } from "./pyodide/pyodide.mjs";

const PROTOCOL = 1;
const RUNTIME = new URL("./pyodide/", import.meta.url).href;

/** @type {(text: string) => string} */
let handle;

/** @param {number} pageProtocol */
async function start(pageProtocol) {
  if (pageProtocol !== PROTOCOL) return postMessage({ type: "failed", code: "protocol" });
  const python = await loadPyodide({
    indexURL: RUNTIME,
    stdLibURL: `${RUNTIME}python_stdlib.zip`,
    lockFileURL: `${RUNTIME}pyodide-lock.json`,
    packages: ["strayline"],
  });
  const core = python.pyimport("strayline.protocol");
  handle = core.handle;
  postMessage({ type: "ready", protocol: core.PROTOCOL, version: python.pyimport("strayline").__version__ });
}

addEventListener("message", async ({ data }) => {
  try {
    if (data.type === "start") await start(data.protocol);
    else if (data.type === "ask") postMessage({ type: "reply", text: handle(data.text) });
  } catch (error) {
    console.error(error);
    postMessage({ type: "failed", code: "crash" });
  }
});
