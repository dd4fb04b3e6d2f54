// Parts of a page that take their time to compute: asked for once the page stands, and put where their
// links were. Without this script, or without an answer, the link leads to the same part as a page.
async function fill(link) {
  const place = link.closest("section");
  place.setAttribute("aria-busy", "true");
  try {
    const r = await fetch(link.dataset.later);
    if (r.ok && !r.redirected) {
      const answer = new DOMParser().parseFromString(await r.text(), "text/html").getElementById(place.id);
      if (answer) place.replaceChildren(...answer.childNodes);
    }
  } catch {
    // no network: the link stays
  }
  place.removeAttribute("aria-busy");
}

// Asked for only when it comes near the window: at the end of a long table most readers never do.
const near = new IntersectionObserver((seen) => {
  for (const { isIntersecting, target } of seen) {
    if (!isIntersecting) continue;
    near.unobserve(target);
    fill(target);
  }
}, { rootMargin: "300px" });

function watch() {
  for (const link of document.querySelectorAll("a[data-later]")) near.observe(link);
}

document.addEventListener("drawn", watch); // a live page has put its links back (live.js)

if (document.readyState === "complete") watch();
else addEventListener("load", watch);
