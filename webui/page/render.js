/**
 * Screen -> DOM, by the templates of index.html and textContent: nothing a person typed or the engine said is ever read as markup.
 * Every text arrives worded; this room parses no number and decides nothing.
 *
 * @typedef {import("./flow.js").Form} Form
 * @typedef {{label: string, text: string}} Fact
 * @typedef {{cause: string, kind: string, title: string, percent: string, share: string, numbers: string[], for: string[],
 *   against: string[]}} Ranked
 * @typedef {{stop: string, causes: string[], title: string, lead: string[], repair: string, remedy: string[], marina: string}} Verdict
 * @typedef {{question: string, subject: string | null, text: string, value: string, value_text: string}} Answered
 * @typedef {{kind: string, title: string, lead: string[], cautions: string[], steps: string[], facts: Fact[], form: Form | null,
 *   why: string, ranking: Ranked[], verdict: Verdict | null, tonight: string[], answered: Answered[], assumed: string[],
 *   progress: string, version: string}} Screen
 */

/** How many causes stand open; the rest fold away. */
const LIKELY = 4;

/**
 * @param {Screen} screen
 * @param {boolean} changing whether it asks an old question again
 * @param {boolean[]} changeable for each answered line, whether it can be changed
 * @returns {DocumentFragment}
 */
export function drawScreen(screen, changing, changeable) {
  const part = copy("screen");
  Object.assign(first(part, "article").dataset, { kind: screen.kind, stop: screen.verdict?.stop ?? "" });
  say(part, "progress", screen.progress);
  say(part, "title", screen.title);
  say(part, "why", screen.why);
  for (const name of /** @type {const} */ (["lead", "cautions", "steps", "tonight", "assumed"])) list(part, name, screen[name]);
  fill(part, "facts", screen.facts.map(drawFact));
  fill(part, "form", screen.form ? [drawForm(screen.form, screen.title)] : []);
  fill(part, "verdict", screen.verdict ? [drawVerdict(screen.verdict, screen.title)] : []);
  fill(part, "unlikely", screen.ranking.slice(LIKELY).map(drawCause));
  fill(part, "ranking", screen.ranking.slice(0, LIKELY).map(drawCause));
  fill(
    part,
    "answered",
    screen.answered.map((line, at) => drawAnswer(line, at, changeable[at] ?? false)),
  );
  // At the end what to do tonight comes before all else that is beside.
  if (screen.verdict && screen.tonight.length) first(part, ".verdict").after(first(part, ".advice"));
  if (!changing) first(part, "[data-act=keep]").remove();
  return part;
}

/** @returns {DocumentFragment} */
export function drawWaiting() {
  return copy("waiting");
}

/**
 * @param {string} message @param {string} code @param {boolean} back whether there is an answer to go back to
 * @returns {DocumentFragment}
 */
export function drawFailure(message, code, back) {
  const part = copy("failure");
  say(part, "message", message);
  say(part, "code", code);
  if (!back) first(part, "[data-act=back]").remove();
  return part;
}

/** @param {Form} form @param {string} title @returns {DocumentFragment} */
function drawForm(form, title) {
  const part = copy(`${form.input}-form`);
  say(part, "problem", form.problem);
  // A question whose heading already asks it is not asked twice to the eye; its group keeps the name.
  first(part, "[data-slot=legend]").classList.toggle("unseen", form.legend === title);
  say(part, "legend", form.legend);
  if (form.input === "number") drawReading(part, form);
  fill(
    part,
    "choices",
    form.choices.map(({ value, label }) => {
      const choice = copy("choice");
      const button = first(choice, "button");
      button.textContent = label;
      button.setAttribute("value", value);
      if (value === form.value) button.setAttribute("aria-current", "true");
      return choice;
    }),
  );
  return part;
}

/** @param {DocumentFragment} part @param {Form} form */
function drawReading(part, form) {
  const input = /** @type {HTMLInputElement} */ (first(part, "input"));
  say(part, "label", form.legend);
  say(part, "unit", form.unit);
  input.value = form.choices.some(({ value }) => value === form.value) ? "" : form.value;
  input.setAttribute("aria-describedby", form.problem ? "problem unit" : "unit");
  if (form.problem) input.setAttribute("aria-invalid", "true");
}

/** @param {Fact} fact @returns {DocumentFragment} */
function drawFact({ label, text }) {
  const part = copy("fact");
  say(part, "label", label);
  say(part, "text", text);
  return part;
}

/** @param {Ranked} cause @returns {DocumentFragment} */
function drawCause(cause) {
  const part = copy("cause");
  first(part, "li").dataset.kind = cause.kind;
  say(part, "title", cause.title);
  say(part, "percent", cause.percent);
  first(part, ".bar").style.setProperty("--share", cause.share);
  for (const name of /** @type {const} */ (["numbers", "for", "against"])) list(part, name, cause[name]);
  return part;
}

/** @param {Verdict} verdict @param {string} title of the screen; not said twice @returns {DocumentFragment} */
function drawVerdict(verdict, title) {
  const part = copy("verdict");
  say(part, "title", verdict.title === title ? "" : verdict.title);
  for (const name of /** @type {const} */ (["repair", "marina"])) say(part, name, verdict[name]);
  for (const name of /** @type {const} */ (["lead", "remedy"])) list(part, name, verdict[name]);
  return part;
}

/** @param {Answered} line @param {number} at @param {boolean} changeable @returns {DocumentFragment} */
function drawAnswer(line, at, changeable) {
  const part = copy("answer");
  say(part, "text", line.text);
  say(part, "value_text", line.value_text);
  say(part, "which", `: ${line.text}`);
  const change = first(part, "[data-act=change]");
  change.dataset.line = String(at);
  if (!changeable) change.remove();
  return part;
}

/** @param {string} id @returns {DocumentFragment} */
function copy(id) {
  const template = /** @type {HTMLTemplateElement} */ (document.getElementById(id));
  return /** @type {DocumentFragment} */ (template.content.cloneNode(true));
}

/** @param {ParentNode} part @param {string} selector @returns {HTMLElement} */
function first(part, selector) {
  return /** @type {HTMLElement} */ (part.querySelector(selector));
}

/** Puts a text in its slot; an empty one takes its part of the page away. @param {ParentNode} part @param {string} slot @param {string} text */
function say(part, slot, text) {
  const place = first(part, `[data-slot=${slot}]`);
  place.textContent = text;
  if (!text) away(place);
}

/** @param {ParentNode} part @param {string} slot @param {Node[]} nodes */
function fill(part, slot, nodes) {
  const place = first(part, `[data-slot=${slot}]`);
  place.append(...nodes);
  if (!nodes.length) away(place);
}

/** @param {ParentNode} part @param {string} name @param {string[]} lines */
function list(part, name, lines) {
  const place = first(part, `[data-lines=${name}]`);
  for (const line of lines) {
    const element = document.createElement(/^[OU]L$/.test(place.tagName) ? "li" : "p");
    element.textContent = line;
    place.append(element);
  }
  if (!lines.length) away(place);
}

/** @param {Element} place */
function away(place) {
  (place.closest("[data-part]") ?? place).remove();
}
