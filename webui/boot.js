// The page's side of the worker that runs Python: start, time limit, restart. The worker keeps no session, so it may be ended and started
// again at any time; the page sends all answers with every request.

import { scriptURL } from "./trusted.js";

/** The number both sides must name before anything else is said. */
export const PROTOCOL = 1;

/**
 * What became of the engine. `code` is "" unless failed: "no_wasm" (this browser cannot run it), "worker" (the script did not start),
 * "timeout" (nothing heard in time), "protocol" (page and core are of different versions), "crash" (Python ended or refused to start).
 * `key` names the sentence among the page's words.
 *
 * @typedef {{state: "starting" | "ready" | "failed", code: string, key: string, version: string}} EngineState
 */

/** @typedef {{type: string, code?: string, protocol?: number, version?: string, text?: string}} Message from the worker */

/** No working engine; `code` as in EngineState. */
export class EngineError extends Error {
  /** @param {string} code */
  constructor(code) {
    super(`the engine failed: ${code}`);
    this.code = code;
  }
}

export class Engine {
  /** @type {WorkerLife | null} */
  #life = null;
  /** @type {Promise<unknown>} the last request; the next one waits for it, so a reply needs no matching */
  #turn = Promise.resolve();
  #count = 0;
  #bootMs;
  #answerMs;
  #onState;

  /**
   * @param {object} [options]
   * @param {number} [options.timeoutMs] how long a boot may take: a first visit on a slow line fetches about 8 MB
   * @param {number} [options.answerMs] how long one reply may take: a changed set-up is seconds here, many more on an old phone
   * @param {(state: EngineState) => void} [options.onState]
   */
  constructor({ timeoutMs = 90_000, answerMs = 60_000, onState = () => {} } = {}) {
    this.#bootMs = timeoutMs;
    this.#answerMs = answerMs;
    this.#onState = onState;
  }

  /** Start Python unless it is started or starting. Resolves when it answers; rejects with EngineError. */
  async start() {
    if (this.#life) return this.#life.ready;
    const life = new WorkerLife(this.#bootMs);
    this.#life = life;
    this.#onState({ state: "starting", code: "", key: "", version: "" });
    try {
      const version = await life.ready;
      if (this.#life === life) this.#onState({ state: "ready", code: "", key: "", version });
      return version;
    } catch (error) {
      this.#fail(life, error);
      throw error;
    }
  }

  /** End the worker, whatever it is doing, and start another. */
  restart() {
    this.#life?.end("crash");
    this.#life = null;
    return this.start();
  }

  /**
   * Send one request (language, units, view, answers; id and protocol are added here) and wait for the reply. When the worker crashes or
   * is silent too long, another is started and asked once more.
   *
   * @param {Record<string, unknown>} request
   * @returns {Promise<{id: string, protocol: number, screen?: any, error?: {code: string, message: string, details: any}}>}
   */
  ask(request) {
    const reply = this.#turn.then(() => this.#ask(request));
    this.#turn = reply.catch(() => {});
    return reply;
  }

  /** @param {Record<string, unknown>} request */
  async #ask(request) {
    this.#count += 1;
    const text = JSON.stringify({ ...request, id: String(this.#count), protocol: PROTOCOL });
    await this.start();
    try {
      return await this.#exchange(text);
    } catch {
      await this.restart();
    }
    const life = this.#life;
    try {
      return await this.#exchange(text);
    } catch (error) {
      if (life) this.#fail(life, error);
      throw error;
    }
  }

  /** @param {string} text */
  async #exchange(text) {
    if (!this.#life) throw new EngineError("crash");
    return JSON.parse(await this.#life.exchange(text, this.#answerMs));
  }

  /**
   * Give a life up, unless another has replaced it meanwhile.
   *
   * @param {WorkerLife} life
   * @param {unknown} error
   */
  #fail(life, error) {
    const code = error instanceof EngineError ? error.code : "crash";
    life.end(code);
    if (this.#life !== life) return;
    this.#life = null;
    this.#onState({ state: "failed", code, key: "boot_failed", version: "" });
  }
}

/** One worker, from its start to its end. */
class WorkerLife {
  /** @type {Worker | null} */
  #worker = null;
  /** @type {(message: Message) => void} */
  #hear = () => {};
  /** @type {(code: string) => void} */
  #stop = () => {};

  /** @param {number} bootMs */
  constructor(bootMs) {
    /** Resolves to the core's version once the worker answers. */
    this.ready = this.#boot(bootMs);
  }

  /** @param {number} bootMs */
  async #boot(bootMs) {
    if (!canCompile()) throw new EngineError("no_wasm");
    const ready = await this.#waitFor("ready", bootMs, () => this.#open());
    if (ready.protocol !== PROTOCOL) throw new EngineError("protocol");
    return ready.version ?? "";
  }

  #open() {
    const worker = new Worker(scriptURL("worker.js"), { type: "module" });
    worker.onmessage = ({ data }) => (data.type === "failed" ? this.#stop(data.code) : this.#hear(data));
    worker.onerror = () => this.#stop("worker");
    worker.postMessage({ type: "start", protocol: PROTOCOL });
    this.#worker = worker;
  }

  /**
   * @param {string} text a request
   * @param {number} limitMs
   * @returns {Promise<string>} its reply
   */
  async exchange(text, limitMs) {
    const message = await this.#waitFor("reply", limitMs, () => this.#worker?.postMessage({ type: "ask", text }));
    return message.text ?? "";
  }

  /** @param {string} code what whoever still waits is told */
  end(code) {
    this.#worker?.terminate();
    this.#worker = null;
    this.#stop(code);
  }

  /**
   * Do `first`, then wait for one message of a type, a failure, or the time limit.
   *
   * @param {string} type
   * @param {number} limitMs
   * @param {() => void} first
   * @returns {Promise<Message>}
   */
  #waitFor(type, limitMs, first) {
    return new Promise((resolve, reject) => {
      // Always a limit: without leave to compile WebAssembly the loader neither succeeds nor fails, it hangs.
      const timer = setTimeout(() => this.#stop("timeout"), limitMs);
      this.#hear = (message) => {
        if (message.type !== type) return;
        clearTimeout(timer);
        resolve(message);
      };
      this.#stop = (code) => {
        clearTimeout(timer);
        reject(new EngineError(code));
      };
      try {
        first();
      } catch {
        this.#stop("worker");
      }
    });
  }
}

/** Whether this page may compile WebAssembly at all: the empty module, eight bytes. */
function canCompile() {
  try {
    return new WebAssembly.Module(Uint8Array.of(0, 0x61, 0x73, 0x6d, 1, 0, 0, 0)) instanceof WebAssembly.Module;
  } catch {
    return false;
  }
}
