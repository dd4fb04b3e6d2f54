// The button says how many papers it releases. Without this it says "the selected papers".
const button = document.querySelector("[data-count]");
if (button) {
  const boxes = [...document.querySelectorAll("input[name=serial]")];
  const plain = button.textContent;
  const say = () => {
    const n = boxes.filter((b) => b.checked).length;
    button.textContent = n === 0 ? plain : n === 1 ? button.dataset.one : button.dataset.many.replace("2", String(n));
  };
  for (const b of boxes) b.addEventListener("change", say);
  say();
}
