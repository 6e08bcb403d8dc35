// The page's one Trusted Types policy. The content security policy names it ("app") and allows it to be made once, so everything that
// starts a worker or registers the service worker takes its address from here.

const HERE = new URL("./", import.meta.url);

/** @param {string} name the file name of a script of this site */
function ownScript(name) {
  const url = new URL(name, HERE);
  if (url.origin !== HERE.origin || !url.pathname.startsWith(HERE.pathname)) throw new TypeError(`not a script of this site: ${name}`);
  return url.href;
}

/** @type {{createScriptURL: (name: string) => string}} */
const policy = /** @type {any} */ (globalThis).trustedTypes?.createPolicy("app", { createScriptURL: ownScript }) ?? {
  createScriptURL: ownScript,
};

/**
 * The address of one of our own scripts beside this file, in the form that `new Worker` and `serviceWorker.register` take.
 *
 * @param {string} name such as "worker.js"
 * @returns {string} a TrustedScriptURL where the browser has them
 */
export function scriptURL(name) {
  return policy.createScriptURL(name);
}
