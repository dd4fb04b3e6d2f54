// Draws the page anew when the server tells that its batch changed. Who is typing is not disturbed, and
// what was typed is not lost: the page then waits until nothing typed is left on it.
const main = document.querySelector("main[data-live]");

if (main) {
  const source = new EventSource(main.dataset.live);
  let drawing = false;

  const fields = "input, textarea, select";
  const touched = (f) => (f.options ? f.selectedIndex !== Math.max(0, [...f.options].findIndex((o) => o.defaultSelected)) : f.value !== f.defaultValue || f.checked !== f.defaultChecked);
  const typing = () => document.activeElement.matches(`main :is(${fields})`) || [...main.querySelectorAll(fields)].some(touched);

  async function draw() {
    if (drawing || typing()) {
      main.dataset.stale = "";
      return;
    }
    drawing = true;
    delete main.dataset.stale;
    try {
      const answer = await fetch(location.href, { headers: { "X-Live": "1" } });
      const fresh = answer.ok && new DOMParser().parseFromString(await answer.text(), "text/html").querySelector("main[data-live]");
      if (!fresh) source.close(); // signed out: the page stays as it is, and the next act says so
      else if (typing()) main.dataset.stale = "";
      else replace(fresh);
    } catch {
      // no network: the stream begins again by itself when it is back, and tells
    } finally {
      drawing = false;
    }
    if ("stale" in main.dataset && !typing()) draw();
  }

  function replace(fresh) {
    const at = main.contains(document.activeElement) ? document.activeElement.getAttribute("href") : null;
    main.replaceChildren(...fresh.childNodes);
    document.dispatchEvent(new Event("drawn"));
    if (at) main.querySelector(`a[href="${CSS.escape(at)}"]`)?.focus({ preventScroll: true });
  }

  source.addEventListener("changed", draw);
  main.addEventListener("focusout", () => setTimeout(() => "stale" in main.dataset && draw()));
  addEventListener("pagehide", () => source.close());
}
