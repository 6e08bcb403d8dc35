/**
 * The parts of the page that need no engine: the safety gate and the sheets that links open (stop, tonight, cautions).
 * They are HTML already; this room hears which sign was tapped, and moves the focus where the eye goes.
 */

/**
 * Calls `answered` with each gate answer: a sign, "unknown" or "none". The link itself opens the orders.
 * @param {(value: string) => void} answered
 */
export function onGate(answered) {
  for (const control of document.querySelectorAll("[data-gate]")) {
    control.addEventListener("click", () => answered(/** @type {HTMLElement} */ (control).dataset.gate ?? "unknown"));
  }
}

/** The sheet that the address names, or null at home. @returns {HTMLElement | null} */
export function openSheet() {
  const named = document.getElementById(location.hash.slice(1));
  return named?.classList.contains("sheet") ? named : null;
}

/** The sheet with the orders for a sign. One that is not known counts as "I don't know". @param {string} sign @returns {string} */
export function stopSheet(sign) {
  const own = `stop-${sign}`;
  return document.getElementById(own) ? own : "stop-unknown";
}

/** Where the sheets' way back leads. @param {string} address */
export function returnTo(address) {
  for (const link of document.querySelectorAll("a.return")) link.setAttribute("href", address);
}

/**
 * Adds to a stop sheet what the engine says and the sheet does not.
 * @param {string} id @param {string[]} lines
 */
export function addToSheet(id, lines) {
  const sheet = /** @type {HTMLElement} */ (document.getElementById(id));
  const place = /** @type {HTMLElement} */ (sheet.querySelector("[data-reply]"));
  place.replaceChildren();
  const said = new Set([...sheet.querySelectorAll("h2, p, li")].map((element) => element.textContent));
  for (const line of lines) {
    if (said.has(line)) continue;
    const paragraph = document.createElement("p");
    paragraph.textContent = line;
    place.append(paragraph);
  }
}

/** One of the catalogue's fixed words. @param {string} key @returns {string} */
export function word(key) {
  const words = /** @type {HTMLTemplateElement} */ (document.getElementById("words"));
  return words.content.querySelector(`[data-word="${CSS.escape(key)}"]`)?.textContent ?? key;
}

/** Moves focus and view to a part's heading, as on a new page. @param {ParentNode} part */
export function faceHeading(part) {
  const heading = /** @type {HTMLElement | null} */ (part.querySelector("h2"));
  heading?.focus({ preventScroll: true });
  heading?.scrollIntoView();
}
