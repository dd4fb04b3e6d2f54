// The page of a reading round. It keeps what is typed in the queue and goes on at once; what the server
// answers is shown at the place. Nothing on it tells what a reading should be or was: a value is seen in
// the field while it is typed, and by its own reader who corrects it.

import { createField, isNumber } from "./field.js";
import { createPlaces } from "./places.js";
import { createQueue, postTo } from "./queue.js";
import { uuid7 } from "./uuid7.js";

const model = JSON.parse(document.getElementById("round-model").textContent);
const $ = (id) => document.getElementById(id);

/** say fills the blanks of a sentence of the page. */
function say(name, blanks = {}) {
  return model.words[name].replace(/\{(\w+)\}/g, (_, b) => blanks[b] ?? "");
}

const clock = timeOfDay(model.zone);

function timeOfDay(timeZone) {
  const form = { hour: "2-digit", minute: "2-digit", second: "2-digit", hourCycle: "h23" };
  let intl;
  try {
    intl = new Intl.DateTimeFormat("en-GB", { ...form, timeZone });
  } catch {
    intl = new Intl.DateTimeFormat("en-GB", form); // a zone the browser does not know
  }
  return (at) => intl.format(at);
}

/** shown writes a value as people read it: the true minus, the sign always, the language's point. */
function shown(value) {
  if (model.words["seen-" + value]) return model.words["seen-" + value];
  let v = value.replace(/^-/, "−");
  if (/^[\d.,]/.test(v) && /[1-9]/.test(v)) v = "+" + v;
  return model.comma ? v.replace(".", ",") : v;
}

const places = createPlaces(model);
const draw = createDrawing();
for (const i of model.holders.keys()) draw.bind(i);
if ($("entry")) start();

function start() {
  const queue = createQueue({ send: postTo(model.readings) });
  let here = places.at(...model.at);
  const field = createField({
    form: $("entry"),
    input: $("value"),
    codes: model.codes,
    word: (o) => model.words["short-" + o],
    onEnter: enter,
    onMove: (to) => select(places.move(here, to)),
    onType: () => keepDraft(),
  });

  // --- walking -----------------------------------------------------------------------------------

  function keepDraft() {
    if (!here || !field) return;
    here.draft = field.empty() ? null : field.typed();
    $("why").textContent = "";
  }

  function select(p) {
    const before = here;
    here = p;
    field.set(p.draft ?? {});
    if (before !== p) $("f-reason").value = "";
    label();
    draw.show(p);
    draw.place(before, here);
    draw.place(p, here);
    field.focus();
  }

  /** needsReason tells whether another value for the place is a correction that names its reason. */
  const needsReason = (p) => p.state === "read" && !(p.mine && model.open);

  function label() {
    const p = here;
    const n = { n: p.n };
    const look = p.ask?.kind === "look" ? (p.ask.item.confirm.length ? "onceMore" : "again") : p.state === "look" ? "again" : "";
    const off = p.state === "off" || p.state === "empty";
    $("l-value").textContent = off ? say("none", n) : look ? say(look, n) : p.state === "read" ? say("correct", n) : say("field", n);
    $("serial").textContent = p.serial ?? "";
    $("sign").textContent = off ? (p.state === "off" ? say("hintEnded", p) : say("hintEmpty")) : say("sign");
    $("note").textContent = look ? say("hintAgain") : p.state === "read" ? ownNote(p) : "";
    $("reason").hidden = !needsReason(p);
    $("typing").classList.toggle("again", look !== "");
    $("menu").href = `${model.page}/movement?serial=${encodeURIComponent(p.serial ?? "")}`;
    field.lock(off);
  }

  /** ownNote says what stands at a place, to its own reader alone. */
  function ownNote(p) {
    if (needsReason(p)) return say("hintOther");
    if (p.own === null) {
      p.own = "";
      askOwn(p);
    }
    return p.own ? say("hintOwn", { value: shown(p.own) }) : say("hintOwnUnseen");
  }

  async function askOwn(p) {
    try {
      const r = await fetch(`${model.readings}?serial=${encodeURIComponent(p.serial)}`, { headers: { Accept: "application/json" } });
      if (!r.ok) return;
      const { value } = await r.json();
      if (value && !p.kept) p.own = value;
      if (here === p) label();
    } catch {
      // no network: the place can be corrected without seeing what stands there
    }
  }

  // --- entering ----------------------------------------------------------------------------------

  function enter({ text, code }) {
    const p = here;
    if (!text && !code) return tell(say("emptyField"));
    if (text && !isNumber(text, model.comma)) return ($("why").textContent = say("notNumber"));
    const reason = $("f-reason").value.trim();
    if (needsReason(p) && !reason) {
      $("why").textContent = say("reasonNeeded");
      return $("f-reason").focus();
    }
    p.draft = null;
    put(p, text || code, reason);
    onward(p);
  }

  /** put keeps a value for a place: what a second look asks for, else a new entry. */
  function put(p, value, reason) {
    const look = p.ask?.kind === "look" && !model.words["seen-" + value] ? p.ask.item : null;
    const item = look ? { ...look, confirm: [...look.confirm, value] } : fresh(p, value, reason);
    Object.assign(p, { before: { state: p.state, code: p.code, mine: p.mine, own: p.own }, state: "read", mine: true, own: look ? p.own : value, ask: null, kept: p.kept + 1 });
    p.code = model.words["seen-" + value] ? value : "";
    queue.put({ id: item.id, cell: String(p.serial), item, why: look ? look.why : "", at: Date.now() });
    tell(say("kept", p));
    draw.place(p, here);
  }

  function fresh(p, value, reason) {
    const item = { id: uuid7(), batch: model.batch, serial: p.serial, step: model.k, kind: model.kind, method: "typed", value, base: p.nth, confirm: [] };
    if (model.kind === "state") item.read_at = new Date().toISOString();
    if (model.comma) item.comma = true;
    if (reason) item.reason = reason;
    return item;
  }

  function onward(p) {
    const next = places.after(p);
    if (next) return select(next);
    select(p);
    if (!places.all.some((x) => x.state === "to-do" || x.state === "look")) tell(say("allRead"));
    draw.allRead();
  }

  // --- answers -----------------------------------------------------------------------------------

  const answers = {
    accepted(p, entry, answer) {
      p.nth = answer.nth;
      const saved = say("saved", { n: p.n, time: clock(Date.now()) });
      tell(entry.item.confirm.length && entry.why ? say("savedAfterLook", { saved, why: entry.why }) : saved);
    },
    duplicate(p, entry, answer) {
      this.accepted(p, entry, answer);
    },
    second_look(p, entry, answer) {
      const later = queue.take(entry.cell).at(-1); // typed again before anybody asked: that was blind too
      p.kept -= later ? 1 : 0;
      Object.assign(p, { state: "look", ask: { kind: "look", item: { ...entry.item, why: answer.detail ?? "" } }, mine: p.before?.mine ?? false, code: "" });
      if (later) return put(p, later.item.value, later.item.reason);
      tell(say(entry.item.confirm.length ? "lookOnceMore" : "lookAgain", p));
      // Eyes are on the movement: the page goes back only where nobody is typing and the holder was left.
      const done = !places.all.some((x) => x.state === "to-do");
      if (field.empty() && (here === p || here.holder !== p.holder || done)) select(p);
    },
    refused(p, entry, answer) {
      undo(p);
      p.ask = { kind: "refused", text: answer.detail ?? say("callRefused"), item: entry.item };
    },
    conflict(p, entry, answer) {
      const { current } = answer;
      const mine = queue.take(entry.cell).at(-1) ?? entry;
      p.kept -= mine === entry ? 0 : 1;
      Object.assign(p, { nth: current.nth, state: "read", mine: false, own: null, code: model.words["seen-" + current.value] ? current.value : "" });
      if (same(current.value, mine.item.value)) return tell(say("bothAgree", { n: p.n, name: current.read_by }));
      p.ask = { kind: "conflict", current, item: mine.item, at: mine.at };
    },
  };

  /** undo puts a place back to what it was before a value that was not taken. */
  function undo(p) {
    Object.assign(p, p.before ?? { state: "to-do", code: "", mine: false, own: null });
  }

  const plain = (v) => v.replace("−", "-").replace(",", ".").replace(/^\+/, "");
  const same = (a, b) => a === b || (plain(a) !== "" && Number(plain(a)) === Number(plain(b)));

  queue.subscribe((event) => {
    if (event.type === "state") return network(event);
    const p = places.serial(event.entry.item.serial);
    if (!p) return;
    p.kept--;
    answers[event.answer.status](p, event.entry, event.answer);
    draw.place(p, here);
    if (here === p) label();
    if (p.ask && p.ask.kind !== "look") tell(say("placeNothing", { n: p.n, state: say("stateTrouble") }));
    asks();
  });

  // --- what needs somebody -----------------------------------------------------------------------

  function asks() {
    const open = places.all.filter((p) => p.ask && !p.kept);
    $("asks").hidden = open.length === 0;
    $("asks").querySelector("ul").replaceChildren(...open.map(askItem));
  }

  function askText(p) {
    const { kind, current, item, text, at } = p.ask;
    const mine = item ? shown(item.value) : "";
    if (kind === "refused") return `${text}`;
    if (kind !== "conflict") return "";
    const time = clock(Date.parse(current.read_at));
    return `${say("conflictText", { name: current.read_by, value: shown(current.value), time, mine })} (${say("conflictAt", { time: clock(at) })}) ${say("decide")}`;
  }

  function askItem(p) {
    const li = document.createElement("li");
    const where = document.createElement("b");
    where.textContent = say("askWhere", { holder: model.holders[p.holder].code, n: p.n });
    const why = document.createElement("p");
    why.append(where, " ", askText(p));
    const acts = document.createElement("div");
    acts.className = "acts";
    acts.append(...askActs(p));
    li.append(why, acts);
    return li;
  }

  function askActs(p) {
    if (p.ask.kind === "look") return [button(say("askAgain", p), () => select(p))];
    if (p.ask.kind === "refused") return [button(say("askType", p), () => (settled(p), select(p)))];
    const { current, item } = p.ask;
    const leave = button(say("leave", { value: shown(current.value) }), () => settled(p));
    const place = button(say("put", { value: shown(item.value) }), () => {
      settled(p);
      put(p, item.value, say("conflictReason"));
    });
    return [leave, place];
  }

  function settled(p) {
    p.ask = null;
    draw.place(p, here);
    asks();
    field.focus();
  }

  function button(text, act) {
    const b = document.createElement("button");
    b.type = "button";
    b.className = "btn";
    b.textContent = text;
    b.addEventListener("click", act);
    return b;
  }

  // --- the network -------------------------------------------------------------------------------

  function network({ pending, trouble, since }) {
    const bar = $("net");
    bar.hidden = !trouble;
    if (!trouble) return;
    const out = trouble === "signed-out";
    const [title, text] = bar.querySelectorAll("b, span");
    title.textContent = out ? say("outTitle") : say("netTitle", { time: clock(since).slice(0, 5) });
    text.textContent = say(out ? "outText" : "netText", { n: pending });
    bar.querySelector("a").hidden = !out;
  }

  function tell(text) {
    $("saved").textContent = text;
  }

  $("net").querySelector("button").addEventListener("click", () => queue.retry());
  addEventListener("focus", () => queue.pending().length > 0 && queue.retry()); // back from signing in

  addEventListener("beforeunload", (e) => {
    if (queue.pending().length > 0) e.preventDefault();
  });

  document.querySelector('form[action$="/close"]')?.addEventListener("submit", (e) => {
    const n = queue.pending().length;
    if (n === 0) return;
    e.preventDefault();
    tell(say("wait", { n }));
  });

  draw.onChoose((p) => select(p));
  draw.onHolder((i) => select(places.first(i)));
  queue.ready.then(() => {
    for (const entry of queue.pending()) {
      const p = places.serial(entry.item.serial);
      if (p) Object.assign(p, { state: "read", mine: true, kept: p.kept + 1 });
    }
    select(here);
  });
}

/** createDrawing is the only part that touches the picture: places, tabs and counts. */
function createDrawing() {
  const elements = new Map();
  let choose = (p) => (location.href = `${model.page}?holder=${encodeURIComponent(model.holders[p.holder].code)}&place=${p.n}`);
  let open = (i) => show({ holder: i });

  function bind(i) {
    for (const el of document.querySelectorAll(`[data-holder="${i}"] [data-place]`)) {
      const p = places.find(i, Number(el.dataset.place));
      if (!p || p.state === "empty") continue;
      elements.set(p, el);
      el.addEventListener("click", (e) => {
        e.preventDefault();
        choose(p);
      });
    }
    document.querySelector(`[data-tab="${i}"]`).addEventListener("click", (e) => {
      e.preventDefault();
      open(i);
    });
  }

  function show(p) {
    for (const box of document.querySelectorAll("[data-holder]")) box.hidden = box.dataset.holder !== String(p.holder);
    for (const tab of document.querySelectorAll("[data-tab]")) {
      const on = tab.dataset.tab === String(p.holder);
      if (on) tab.setAttribute("aria-current", "step");
      else tab.removeAttribute("aria-current");
      if (on && tab.parentElement.scrollHeight > tab.parentElement.clientHeight) tab.scrollIntoView({ block: "nearest" });
    }
    which(p.holder);
  }

  function standing(p, here) {
    if (p.ask && p.ask.kind !== "look") return { state: "look trouble", word: say(p.ask.kind), says: say("stateTrouble") };
    if (p.state === "look") return { state: p === here ? "look here" : "look", sign: "look", word: say("again1"), says: say("stateLook") };
    if (p.state === "off") return { state: p === here ? "off here" : "off", sign: "void", word: p.end, says: p.end };
    if (p.state === "empty") return { state: "empty", says: say("stateEmpty") };
    const kept = p.kept ? " kept" : "";
    const word = p.code ? say("short-" + p.code) : say("read");
    if (p.state === "read") return { state: (p === here ? "here" : "read") + kept, word: p === here ? say("here") : word, says: kept ? say("stateKept") : p.code ? say("seen-" + p.code) : say("stateRead") };
    if (p === here) return { state: "here", word: say("here"), says: say("stateHere") };
    return { state: "to-do", word: p.draft ? say("draft") : "", says: say("stateToDo") };
  }

  function place(p, here) {
    const el = elements.get(p);
    if (!el || p.state === "empty") return;
    const s = standing(p, here);
    el.className = s.state;
    if (p === here) el.setAttribute("aria-current", "step");
    else el.removeAttribute("aria-current");
    el.replaceChildren(
      part("unseen", say(p.serial ? "placeSays" : "placeNothing", { n: p.n, serial: p.serial, state: s.says }), false),
      part("n", String(p.n)),
      ...(s.sign ? [sign(s.sign)] : []),
      ...(s.word ? [part(p.state === "off" ? "" : "val", s.word)] : []),
      part("mono", p.short ?? ""),
    );
    count(p.holder);
  }

  function part(name, text, hidden = true) {
    const span = document.createElement("span");
    if (name) span.className = name;
    if (hidden) span.setAttribute("aria-hidden", "true");
    span.textContent = text;
    return span;
  }

  function sign(name) {
    const svg = document.createElementNS("http://www.w3.org/2000/svg", "svg");
    svg.setAttribute("class", "mark");
    svg.setAttribute("aria-hidden", "true");
    const use = document.createElementNS("http://www.w3.org/2000/svg", "use");
    use.setAttribute("href", "#m-" + name);
    svg.append(use);
    return svg;
  }

  function readText({ read, all, looks }) {
    const text = say("holderRead", { read, all });
    return looks ? say("andLooks", { read: text, n: looks }) : text;
  }

  function count(i) {
    const c = places.counts(places.of(i));
    const tab = document.querySelector(`[data-tab="${i}"]`);
    tab.className = c.read >= c.all ? "full" : c.read > 0 ? "begun" : "";
    tab.querySelector("span").textContent = $("which") ? `${model.holders[i].code}: ${readText(c)}` : readText(c);
    if (tab.hasAttribute("aria-current")) which(i);
    const sum = places.counts(places.all);
    $("n-read").textContent = say("countOf", { read: sum.read, all: sum.all });
    $("n-look").textContent = sum.looks;
  }

  function which(i) {
    if (!$("which")) return;
    $("which").textContent = say("holderOf", { n: i + 1, all: model.holders.length, code: model.holders[i].code });
    $("which-read").textContent = readText(places.counts(places.of(i)));
  }

  /** allRead makes closing the one main act of the page. */
  function allRead() {
    const left = places.all.some((p) => p.state === "to-do" || p.state === "look" || p.ask);
    document.querySelector('form[action$="/close"] button')?.classList.toggle("main", !left);
  }

  return {
    bind,
    show,
    place,
    allRead,
    onChoose: (fn) => (choose = fn),
    onHolder: (fn) => (open = fn),
  };
}
