// Registering a batch: while numbers are pasted, the page shows what the laboratory would make of them.
// The server counts, with the same reader that registers; without this script the button does it.

const form = document.getElementById("register");
const preview = document.getElementById("preview");
let timer = 0;
let asked = 0;

async function look() {
  const mine = ++asked;
  const data = new FormData(form);
  data.set("check", "yes");
  try {
    const r = await fetch(form.action, { method: "POST", body: data });
    if (!r.ok || mine !== asked) return;
    const page = new DOMParser().parseFromString(await r.text(), "text/html");
    preview.replaceChildren(...page.getElementById("preview").childNodes);
  } catch {
    // no network: registering will say so
  }
}

function soon() {
  clearTimeout(timer);
  timer = setTimeout(look, 300);
}

for (const name of ["serials", "holder_type", "file", "depositor", "calibre"]) {
  for (const field of form.querySelectorAll(`[name=${name}]`)) {
    field.addEventListener("input", soon);
    field.addEventListener("change", soon);
  }
}
