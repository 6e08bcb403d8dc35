/**
 * The page: one case, the engine, and what is on show. Wires the rooms together; each tap makes a new case, keeps it, and asks the
 * engine for the whole screen again.
 *
 * @typedef {import("./flow.js").Case} Case
 * @typedef {import("./render.js").Screen} Screen
 */
import { Engine } from "../boot.js";
import { before, gateHolds, newCase, placeOf, placesOf, request, stoppedBy, touched, withAnswer, withChange, withGate } from "./flow.js";
import { goOffline } from "./offline.js";
import { drawFailure, drawScreen, drawWaiting } from "./render.js";
import { addToSheet, faceHeading, onGate, openSheet, returnTo, stopSheet, word } from "./static.js";
import { Store } from "./storage.js";

const WAIT_SHOWN_MS = 250; // an answer sooner than this needs no waiting screen
const SETTLE_MS = 300; // within a double tap

/** @type {Omit<Screen, "title" | "form">} the rest of a screen that only asks an old question again */
const ASKED_AGAIN = {
  kind: "question",
  lead: [],
  cautions: [],
  steps: [],
  facts: [],
  why: "",
  ranking: [],
  verdict: null,
  tonight: [],
  answered: [],
  assumed: [],
  progress: "",
  version: "",
};

const language = document.documentElement.lang;
const main = part("main");
const home = part("home");
const gate = part("gate");
const flow = part("flow");
const trouble = part("trouble");
const store = new Store();
const engine = new Engine({ onState: hearEngine });

let held = newCase(new Date(), language);
/** @type {Case[]} the cases before each tap, for undo */
const past = [];
/** @type {Screen | null} the last whole screen the engine gave */
let latest = null;
/** The place of the answer being changed, -1 when none is. */
let changing = -1;
/** Whether the gate was passed on this visit, or so lately that it still holds. */
let passed = false;
/** Counts what was asked; a reply to an older case is dropped. */
let asked = 0;

const opened = open();
onGate(async (value) => {
  await opened;
  passed = true;
  latest = null;
  await act(withGate(held, value, new Date()));
});
flow.addEventListener("submit", (event) => {
  event.preventDefault();
  answer(event);
});
home.addEventListener("click", (event) => {
  const button = /** @type {HTMLElement | null} */ (/** @type {Element} */ (event.target).closest("[data-act]"));
  if (button) ACTS[button.dataset.act ?? ""]?.(button);
});
addEventListener("hashchange", () => {
  mark();
  faceHeading(inSight());
});
goOffline();
engine.start().catch(() => {}); // what went wrong is told by hearEngine

async function open() {
  const kept = await store.latest();
  if (kept) held = kept;
  passed = gateHolds(held, new Date());
  if (held.answers.length) await show();
}

/** @type {Record<string, (button: HTMLElement) => unknown>} what the buttons do */
const ACTS = {
  back: () => look(before(held, changing < 0 ? placeOf(held, latest?.form ?? null) : changing)),
  keep: () => (latest ? receive(latest) : show()),
  change: (button) => look(placesOf(held, latest?.answered ?? [])[Number(button.dataset.line)] ?? -1),
  undo: () => {
    const previous = past.pop();
    if (!previous) return;
    passed = gateHolds(previous, new Date());
    return keep(touched(previous, new Date()));
  },
  new: () => {
    latest = null;
    passed = false;
    return act(newCase(new Date(), language));
  },
  again: () => {
    engine.restart().catch(() => {});
    return show();
  },
};

/** A tap that changes the case: keep the old one for undo. @param {Case} next */
function act(next) {
  past.push(held);
  return keep(next);
}

/** The case is on the phone before the engine hears of it. @param {Case} next */
async function keep(next) {
  // At once, before anything is waited for: one question takes one tap.
  flow.setAttribute("aria-busy", "true");
  holdAnswers();
  held = next;
  changing = -1;
  await store.save(held);
  await show();
}

/** @param {SubmitEvent} event */
function answer(event) {
  const form = /** @type {HTMLFormElement} */ (event.target);
  const choice = /** @type {HTMLButtonElement | null} */ (event.submitter);
  const value = choice?.name === "answer" ? choice.value : String(new FormData(form).get("reading") ?? "");
  const now = new Date();
  if (changing >= 0) return act(withChange(held, changing, value, now));
  if (latest?.form) return act(withAnswer(held, { title: latest.title, form: latest.form }, value, now));
}

/** Shows an old answer to be changed; before the first one comes the gate. @param {number} place */
function look(place) {
  changing = place;
  passed &&= place >= 0;
  draw();
  faceHeading(inSight());
}

/** Shows where the case stands: the gate and a stop at once, everything else as soon as the engine has said it. */
async function show() {
  const sign = stoppedBy(held);
  if (sign) location.hash = stopSheet(sign);
  if (atGate()) draw();
  if (!held.answers.length) return faceHeading(inSight());
  asked += 1;
  const turn = asked;
  const slow = setTimeout(() => !latest && draw(), WAIT_SHOWN_MS);
  try {
    const reply = await engine.ask(request(held, language));
    if (turn !== asked) return;
    if (reply.screen) receive(reply.screen);
    else if (reply.error) fail(reply.error.message, reply.error.code);
  } catch {
    // The engine did not start, or died twice; hearEngine has put that on the page.
  } finally {
    clearTimeout(slow);
  }
}

/** @param {Screen} screen */
function receive(screen) {
  changing = -1;
  latest = screen;
  const sign = stoppedBy(held);
  if (sign) return addToSheet(stopSheet(sign), [...screen.lead, ...screen.cautions, ...screen.steps]);
  draw();
  if (atGate()) return;
  /** @type {HTMLElement | null} */
  const refused = flow.querySelector("input[aria-invalid]") ?? flow.querySelector(".problem");
  if (refused) refused.focus();
  else faceHeading(inSight());
}

/** The part of the page that is on show. */
function inSight() {
  return openSheet() ?? (atGate() ? gate : flow);
}

function atGate() {
  return (
    !passed || stoppedBy(held) !== "" || !held.answers.some(({ question }) => question === "gate") || latest?.form?.question === "gate"
  );
}

function draw() {
  gate.hidden = !atGate();
  flow.hidden = atGate();
  trouble.hidden = true;
  flow.removeAttribute("aria-busy");
  const screen = shown();
  flow.replaceChildren(screen ? drawScreen(screen, changing >= 0, changeable(screen)) : drawWaiting());
  drawCase();
  settle();
  mark();
}

/** Says on <main> which kind of screen it is, and where the sheets lead back to. */
function mark() {
  const sheet = openSheet();
  const sign = stoppedBy(held);
  main.dataset.screen = sheet?.classList.contains("stop") ? "stop" : (!atGate() && latest?.kind) || "start";
  returnTo(sign ? `#${stopSheet(sign)}` : "#home");
  const heading = inSight().querySelector("h2")?.textContent;
  document.title = heading ? `${heading} – Strayline` : "Strayline";
}

/** The screen as the engine gave it, or an old question again in the words it was asked in. */
function shown() {
  const old = held.answers[changing];
  if (!old?.asked) return latest;
  const beside = { ranking: latest?.ranking ?? [], answered: latest?.answered ?? [] };
  return { ...ASKED_AGAIN, ...beside, title: old.asked.title, form: { ...old.asked.form, value: old.value } };
}

/** What stands below gate and questions alike: which case it is, whether it is kept, and the way back out of a tap. */
function drawCase() {
  part("case").hidden = !held.answers.length && !past.length;
  part("case-title").textContent = held.title;
  part("kept").textContent = store.kept ? word("answer_kept") : word("storage_failed");
  part("undo").hidden = !past.length;
}

/** @param {Screen} screen */
function changeable(screen) {
  return placesOf(held, screen.answered).map((place) => held.answers[place]?.asked !== undefined);
}

/** Answers wait for a blink, so that a second tap meant for the screen before does not land on this one. */
function settle() {
  const buttons = holdAnswers();
  setTimeout(() => {
    for (const button of buttons) button.disabled = false;
  }, SETTLE_MS);
}

/** Makes the answers deaf; a field stays open, for it may have the focus. */
function holdAnswers() {
  /** @type {NodeListOf<HTMLButtonElement>} */
  const buttons = flow.querySelectorAll("form button");
  for (const button of buttons) button.disabled = true;
  return buttons;
}

/** @param {import("../boot.js").EngineState} engineState */
function hearEngine({ state, code, key }) {
  if (state === "failed") fail(word(key), code);
  else trouble.hidden = true;
}

/** Something is wrong on our side: the gate and the sheets stay as they are, the questions make room. @param {string} message @param {string} code */
function fail(message, code) {
  latest = null;
  trouble.replaceChildren(drawFailure(message, code, before(held, held.answers.length) >= 0));
  trouble.hidden = false;
  flow.hidden = true;
}

/** A part of the page that index.html always has. @param {string} id @returns {HTMLElement} */
function part(id) {
  return /** @type {HTMLElement} */ (document.getElementById(id));
}
