// Runs in Node at build, one step a call:  node runtime.mjs PYODIDE compile SOURCE TARGET SHOWN
//                                          node runtime.mjs PYODIDE freeze STDLIB LOCK WHEEL RESOLVER_WHEEL...
//                                          node runtime.mjs PYODIDE verify FOLDER
// The interpreter that the phone gets is the one that compiles, resolves and tries what is sent to it.

import { readFile, writeFile } from "node:fs/promises";
import { basename, join } from "node:path";
import { pathToFileURL } from "node:url";

const [folder, step, ...paths] = process.argv.slice(2);

/** @param {string} from a folder that holds Pyodide @param {object} options */
async function python(from, options) {
  const { loadPyodide } = await import(pathToFileURL(join(from, "pyodide.mjs")).href);
  return loadPyodide({ indexURL: from, checkIntegrity: true, ...options });
}

/** Compile every module in a zip. Lines are kept for tracebacks, columns are not: they would be a quarter of what a phone fetches. */
async function compile([source, target, shown]) {
  const py = await python(folder, { env: { PYTHONNODEBUGRANGES: "1" } });
  py.FS.writeFile("/source.zip", await readFile(source));
  py.FS.writeFile("/compile_zip.py", await readFile(new URL("compile_zip.py", import.meta.url)));
  py.runPython("import sys; sys.path.insert(0, '/')");
  py.pyimport("compile_zip").compile_zip("/source.zip", "/target.zip", shown);
  await writeFile(target, py.FS.readFile("/target.zip"));
}

/** Let micropip resolve our wheel and write down what it chose. */
async function freeze([stdlib, lock, wheel, ...resolver]) {
  const py = await python(folder, { stdLibURL: stdlib });
  // Quiet, so that the last line a build prints is where the site is.
  await py.loadPackage(
    resolver.map((path) => pathToFileURL(path).href),
    { messageCallback: () => {} },
  );
  const local = `/tmp/${basename(wheel)}`;
  py.FS.writeFile(local, await readFile(wheel));
  const micropip = py.pyimport("micropip");
  await micropip.install(`emfs:${local}`);
  await writeFile(lock, micropip.freeze());
}

/** Start from the finished folder exactly as the worker does, and import: installing a wheel that is not there "succeeds". */
async function verify([site]) {
  const py = await python(site, {
    stdLibURL: join(site, "python_stdlib.zip"),
    lockFileURL: join(site, "pyodide-lock.json"),
    packages: ["strayline"],
  });
  const core = py.pyimport("strayline.protocol");
  const request = { id: "build", protocol: core.PROTOCOL, language: "en", units: "si", view: "flow", answers: [] };
  const reply = JSON.parse(core.handle(JSON.stringify(request)));
  if (reply.id !== "build" || !reply.screen) throw new Error(`the core gave no screen: ${JSON.stringify(reply)}`);
}

await { compile, freeze, verify }[step](paths);
