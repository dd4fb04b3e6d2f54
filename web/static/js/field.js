// The one big field of a reading round with its own keys. No system keyboard: on common tablets it has no
// minus and hides the holder. What is typed is a number as it will be kept, or an observation.

const most = 16;

/** createField drives the input and every button with data-key or data-code in its form.
 *
 *  codes     observation by key: { S: "stopped", … }
 *  word(o)   how an observation is written
 *  onEnter   called with { text, code } when Enter is pressed
 *  onMove    called with "left", "right", "up", "down", "before", "next", "first", "last" or "skip"
 *  onType    called whenever what stands in the field changes */
export function createField({ form, input, codes, word, onEnter, onMove, onType }) {
  const moves = {
    ArrowLeft: "left", ArrowRight: "right", ArrowUp: "up", ArrowDown: "down",
    PageUp: "before", PageDown: "next", Home: "first", End: "last",
  };
  let text = "";
  let code = "";
  let locked = false;

  function show() {
    input.value = code ? word(code) : text;
    input.classList.toggle("code", code !== "");
    onType();
  }

  function type(sign) {
    if (locked) return;
    if (code) code = "";
    if (sign === "-") sign = "−";
    if (text.length < most) text += sign;
    show();
  }

  function observe(key) {
    if (locked || text) return;
    code = codes[key];
    show();
  }

  function press(key) {
    if (key === "delete") return locked || (code ? (code = "") : (text = text.slice(0, -1)), show());
    if (key === "skip") return onMove("skip");
    type(key);
  }

  function keydown(e) {
    if (e.ctrlKey || e.metaKey || e.altKey || e.isComposing) return;
    const letter = e.key.length === 1 ? e.key.toUpperCase() : "";
    if (/^[0-9+\-−.,]$/.test(e.key)) return; // comes as input below
    if (codes[letter]) observe(letter);
    else if (e.key === "Backspace" || e.key === "Delete") press("delete");
    else if (e.key === "Escape") set({});
    else if (moves[e.key]) onMove(moves[e.key]);
    else if (e.key.length !== 1) return; // Tab and the like keep their meaning; other signs mean nothing here
    e.preventDefault();
  }

  function set({ text: t = "", code: c = "" }) {
    text = t;
    code = c;
    show();
  }

  input.addEventListener("keydown", keydown);
  // Typed, pasted, dictated: what belongs to a number goes through type, everything else stays out.
  input.addEventListener("beforeinput", (e) => {
    if (e.inputType === "insertLineBreak") return; // Enter sends the form
    e.preventDefault();
    for (const sign of e.data ?? e.dataTransfer?.getData("text") ?? "") if (/[0-9+\-−.,]/.test(sign)) type(sign);
  });
  input.addEventListener("input", show); // an input method that cannot be prevented: the field shows what counts
  form.addEventListener("click", (e) => {
    const button = e.target.closest("[data-key], [data-code]");
    if (!button) return;
    e.preventDefault();
    if (button.dataset.code) {
      text = "";
      observe(button.dataset.code);
    } else press(button.dataset.key);
    input.focus();
  });
  form.addEventListener("submit", (e) => {
    e.preventDefault();
    if (!locked) onEnter({ text, code });
  });
  // Whatever has the focus: digits go into the field, as long as nothing else wants them.
  document.addEventListener("keydown", (e) => {
    const at = document.activeElement;
    if (e.target === input || at?.closest("input, textarea, select, [contenteditable]")) return;
    const digit = /^[0-9+\-−.,]$/.test(e.key);
    if (!digit && (at?.closest("a, button, summary, [tabindex]") || !moves[e.key])) return;
    input.focus(); // what the key types follows the focus
    keydown(e);
  });

  return {
    set,
    focus: () => input.focus({ preventScroll: true }),
    typed: () => ({ text, code }),
    empty: () => !text && !code,
    lock(on) {
      locked = on;
      input.readOnly = on;
    },
  };
}

/** isNumber tells whether a text has the form of a number; whether it can be one is for the server. */
export function isNumber(text, comma) {
  const form = comma ? /^[+−-]?(\d+[.,]?\d*|[.,]\d+)$/ : /^[+−-]?(\d+\.?\d*|\.\d+)$/;
  return form.test(text);
}
