/**
 * Cases on this phone, one row a case, in IndexedDB. Where the browser refuses (private window, full disk), cases live in memory
 * and `kept` says so.
 *
 * @typedef {import("./flow.js").Case} Case
 */
import { openDB } from "./vendor/idb.js";

const CASES = "cases";

export class Store {
  /** @type {Awaited<ReturnType<typeof openDB>> | undefined} */
  #database;

  /** Whether the last thing tried was really written to the phone. */
  kept = true;

  /**
   * The case worked on last, if there is one.
   * @returns {Promise<Case | undefined>}
   */
  async latest() {
    return this.#try(async () => {
      this.#database = await openDB("strayline", 1, { upgrade: (database) => void database.createObjectStore(CASES, { keyPath: "id" }) });
      /** @type {Case[]} */
      const cases = await this.#database.getAll(CASES);
      return cases.sort((one, other) => one.changed.localeCompare(other.changed)).at(-1);
    });
  }

  /** @param {Case} held */
  async save(held) {
    await this.#try(async () => {
      if (!this.#database) throw new Error("no database");
      await this.#database.put(CASES, held);
    });
  }

  /**
   * @template T
   * @param {() => Promise<T>} work
   * @returns {Promise<T | undefined>}
   */
  async #try(work) {
    try {
      const result = await work();
      this.kept = true;
      return result;
    } catch (error) {
      // The page goes on from memory: losing the case at a reload is better than losing the answer at hand.
      console.warn("storage", error);
      this.kept = false;
      return undefined;
    }
  }
}
