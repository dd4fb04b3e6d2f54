// A button that prints the page. It is hidden until this runs, so that none is shown that does nothing.
for (const button of document.querySelectorAll("[data-print]")) {
  button.hidden = false;
  button.addEventListener("click", () => window.print());
}
