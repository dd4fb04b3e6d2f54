// The one way readings leave a page. An entry is kept first, then sent, and dropped only when the server
// has answered for it; the page learns everything from subscribe and knows nothing of networks.
//
// An entry is a plain object that survives JSON: { id, cell, item }, and whatever else its page puts in.
//   id    UUIDv7 made when it was typed: sending an entry twice saves it once
//   cell  names what it is an entry of; entries of one cell go out one after the other
//   item  what the server gets
//
// WHERE ENTRIES ARE KEPT. This version keeps them in memory: they live as long as the page, which warns
// before it is left. A keep that outlives the page (IndexedDB) is given as createQueue({ keep }) and
// needs no change in any page: it is { all(), put(entry), drop(id) }, each returning a promise; all()
// gives what is left from before, in the order in which it was put.

/** memory is the keep of a page without a database. */
export function memory() {
  return { all: async () => [], put: async () => {}, drop: async () => {} };
}

/** Trouble is why a call did not go through: "network" (also a server that fails), "signed-out" or
 *  "refused" (the call as a whole, never to be sent again as it is). */
export class Trouble extends Error {
  constructor(kind, status) {
    super(`${kind} ${status ?? ""}`);
    this.kind = kind;
    this.status = status;
  }
}

/** postTo makes the send of a queue: POST as JSON, one answer for each item, in their order. */
export function postTo(url, within = 20000) {
  return async (items) => {
    let response;
    try {
      response = await fetch(url, {
        method: "POST",
        headers: { "Content-Type": "application/json", Accept: "application/json" },
        body: JSON.stringify({ sent_at: new Date().toISOString(), readings: items }),
        signal: AbortSignal.timeout(within),
      });
    } catch {
      throw new Trouble("network");
    }
    if (response.status === 401) throw new Trouble("signed-out", 401);
    if (response.status >= 500 || response.status === 408 || response.status === 429) throw new Trouble("network", response.status);
    if (!response.ok) throw new Trouble("refused", response.status);
    try {
      const { items: answers } = await response.json();
      if (answers.length === items.length) return answers;
    } catch {
      // cut off on its way: the same as no answer
    }
    throw new Trouble("network", response.status);
  };
}

/** createQueue makes a queue over send(items), which gives the answers or throws a Trouble.
 *
 *  put(entry)      keeps an entry and sends it as soon as can be; resolves when it is kept
 *  pending()       the entries kept and not answered for, oldest first
 *  take(cell)      takes back the entries of a cell that are not on their way, and gives them
 *  retry()         tries at once instead of waiting for the next time
 *  subscribe(fn)   fn({ type: "answer", entry, answer }) for every entry answered for, and
 *                  fn({ type: "state", pending, trouble, since }) when that changes; gives its undoing
 *  ready           resolves when what was kept from before is in the queue
 *
 *  One call is on its way at a time. After trouble the next one waits, twice as long each time. */
export function createQueue({ send, keep = memory(), most = 50, first = 500, longest = 15000 }) {
  const waiting = [];
  const listeners = new Set();
  let flying = new Set();
  let timer = 0;
  let tries = 0;
  let trouble = null;
  let since = null;

  const tell = (event) => listeners.forEach((fn) => fn(event));
  const tellState = () => tell({ type: "state", pending: waiting.length, trouble, since });

  // next is what the coming call brings: the oldest entry of each cell.
  function next() {
    const cells = new Set();
    const call = [];
    for (const entry of waiting) {
      if (cells.has(entry.cell)) continue;
      cells.add(entry.cell);
      call.push(entry);
      if (call.length === most) break;
    }
    return call;
  }

  async function pump() {
    if (flying.size > 0 || timer) return;
    const call = next();
    if (call.length === 0) return;
    flying = new Set(call);
    let answers;
    try {
      answers = await send(call.map((e) => e.item));
      recover();
    } catch (error) {
      if (!(error instanceof Trouble)) console.error(error); // a defect of ours must not stop readings for good
      if (error.kind === "refused") {
        answers = call.map((e) => ({ id: e.id, status: "refused", code: "call_refused", call: error.status }));
      } else {
        flying = new Set();
        stumble(error.kind ?? "network");
        return;
      }
    }
    flying = new Set();
    for (let i = 0; i < call.length; i++) await settle(call[i], answers[i]);
    tellState();
    pump();
  }

  function recover() {
    tries = 0;
    trouble = since = null;
  }

  function stumble(kind) {
    trouble = kind;
    since ??= Date.now();
    const wait = Math.min(longest, first * 2 ** tries++) * (0.8 + 0.4 * Math.random());
    timer = setTimeout(retry, wait);
    tellState();
  }

  function retry() {
    clearTimeout(timer);
    timer = 0;
    pump();
  }

  // settle drops an entry that was answered for. Who was next in its cell had seen it.
  async function settle(entry, answer) {
    waiting.splice(waiting.indexOf(entry), 1);
    if (answer.status === "accepted" || answer.status === "duplicate") {
      for (const later of waiting.filter((e) => e.cell === entry.cell)) {
        later.item.base = answer.nth;
        await keep.put(later);
      }
    }
    await keep.drop(entry.id);
    tell({ type: "answer", entry, answer });
  }

  async function put(entry) {
    waiting.push(entry);
    await keep.put(entry);
    tellState();
    pump();
  }

  function take(cell) {
    const taken = waiting.filter((e) => e.cell === cell && !flying.has(e));
    for (const e of taken) {
      waiting.splice(waiting.indexOf(e), 1);
      keep.drop(e.id);
    }
    return taken;
  }

  addEventListener("online", retry);
  const ready = keep.all().then((left) => {
    waiting.unshift(...left);
    if (left.length > 0) tellState();
    pump();
  });

  return {
    put,
    take,
    retry,
    ready,
    pending: () => [...waiting],
    subscribe(fn) {
      listeners.add(fn);
      return () => listeners.delete(fn);
    },
  };
}
