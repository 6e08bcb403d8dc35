/**
 * A case and what a person may do to it. Pure: every function takes a case and returns another one, so that undo is the case before.
 * The engine is sent all answers every time (the contract of the worker message); nothing here knows what a question means, except
 * the two that must work without the engine: the gate, and the line asked before power is restored.
 *
 * @typedef {{value: string, label: string}} Choice
 * @typedef {{question: string, subject: string | null, input: "choice" | "number", legend: string, choices: Choice[], unit: string,
 *   value: string, problem: string}} Form
 * @typedef {{question: string, subject: string | null}} Topic
 * @typedef {{title: string, form: Form}} Asked how it was asked, so that it can be asked again in the same words
 * @typedef {{question: string, subject: string | null, value: string, seq: number, at: string, asked?: Asked}} Answer
 * @typedef {{id: string, title: string, changed: string, answers: Answer[]}} Case
 */

/** @param {Date} now @param {string} language @returns {Case} */
export function newCase(now, language) {
  const title = new Intl.DateTimeFormat(language, { dateStyle: "medium", timeStyle: "short" }).format(now);
  return { id: `c${now.getTime().toString(36)}`, title, changed: utc(now), answers: [] };
}

/**
 * The case with one more answer; where the form states a problem, the refused answer is replaced instead.
 * @param {Case} held @param {Asked} asked @param {string} value @param {Date} now @returns {Case}
 */
export function withAnswer(held, asked, value, now) {
  const { question, subject } = asked.form;
  const place = placeOf(held, asked.form);
  if (place < held.answers.length) return withChange(held, place, value, now);
  return withEntry(held, { question, subject, value, asked: { title: asked.title, form: { ...asked.form, problem: "", value: "" } } }, now);
}

/**
 * Where the answer to this form goes: the end, or the place of the answer it refuses.
 * @param {Case} held @param {Form | null} form @returns {number}
 */
export function placeOf(held, form) {
  if (!form?.problem) return held.answers.length;
  const places = held.answers.flatMap((answer, index) => (same(answer, form) ? [index] : []));
  return places.at(-1) ?? held.answers.length;
}

/**
 * The case with answer `index` replaced in place: same question, same seq, everything after it kept.
 * @param {Case} held @param {number} index @param {string} value @param {Date} now @returns {Case}
 */
export function withChange(held, index, value, now) {
  const answers = held.answers.map((answer, at) => (at === index ? { ...answer, value, at: utc(now) } : answer));
  return { ...held, changed: utc(now), answers };
}

/**
 * The case with the gate answered: in place when it was answered before. A stopping answer before power was restored goes,
 * so that its line is asked again.
 * @param {Case} held @param {string} value @param {Date} now @returns {Case}
 */
export function withGate(held, value, now) {
  const kept = { ...held, answers: held.answers.filter((answer) => !(answer.question === "clear" && answer.value !== "clear")) };
  const gate = kept.answers.findIndex((answer) => answer.question === "gate");
  return gate < 0 ? withEntry(kept, { question: "gate", subject: null, value }, now) : withChange(kept, gate, value, now);
}

/** The case as the one worked on last. @param {Case} held @param {Date} now @returns {Case} */
export function touched(held, now) {
  return { ...held, changed: utc(now) };
}

/**
 * The sign that stopped this case, or "" while nothing has.
 * @param {Case} held @returns {string}
 */
export function stoppedBy(held) {
  const stop = held.answers.find(
    ({ question, value }) => (question === "gate" && value !== "none") || (question === "clear" && value !== "clear"),
  );
  if (stop?.question === "clear") return "not_clear"; // "I don't know" counts as no, before power as at the gate
  return stop?.value ?? "";
}

/**
 * Whether the gate stands answered, and recently: at a dock things change, so a case opened again later meets the gate first.
 * @param {Case} held @param {Date} now @returns {boolean}
 */
export function gateHolds(held, now) {
  const minutes = (now.getTime() - Date.parse(held.changed)) / 60_000;
  return minutes < GATE_HOLDS_MINUTES && held.answers.some((answer) => answer.question === "gate");
}

const GATE_HOLDS_MINUTES = 30;

/**
 * Where in the case each answered line of the screen stands: the nth line about a question is the nth entry about it. -1 where it is not.
 * @param {Case} held @param {Topic[]} lines @returns {number[]}
 */
export function placesOf(held, lines) {
  return lines.map((line, at) => {
    const nth = lines.slice(0, at).filter((other) => same(other, line)).length;
    return held.answers.flatMap((answer, index) => (same(answer, line) ? [index] : []))[nth] ?? -1;
  });
}

/**
 * The nearest answer before `place` that can be looked at again, -1 where there is none. The gate has its own way back.
 * @param {Case} held @param {number} place @returns {number}
 */
export function before(held, place) {
  return held.answers.flatMap((answer, index) => (index < place && answer.asked ? [index] : [])).at(-1) ?? -1;
}

/** What the engine is asked, without what it adds itself. @param {Case} held @param {string} language */
export function request(held, language) {
  const answers = held.answers.map(({ question, subject, value, seq, at }) => ({ question, subject, value, seq, at }));
  return { language, units: "si", view: "flow", answers };
}

/** @param {Topic} one @param {Topic} other */
function same(one, other) {
  return one.question === other.question && one.subject === other.subject;
}

/** @param {Case} held @param {Omit<Answer, "seq" | "at">} entry @param {Date} now @returns {Case} */
function withEntry(held, entry, now) {
  const seq = 1 + Math.max(0, ...held.answers.map((answer) => answer.seq));
  return { ...held, changed: utc(now), answers: [...held.answers, { ...entry, seq, at: utc(now) }] };
}

/** @param {Date} now UTC in ISO form with its offset spelled out, as the contract asks */
function utc(now) {
  return now.toISOString().replace("Z", "+00:00");
}
