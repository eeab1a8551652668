// Marks a part in which something was typed, and asks before the page is left with it.
// Typing the stored value back in is not told apart from a change: better asked once too often.

document.addEventListener("input", (event) => {
  event.target.closest("form[data-part]")?.setAttribute("data-unsaved", "");
});

window.addEventListener("beforeunload", (event) => {
  if (document.querySelector("form[data-unsaved]")) event.preventDefault();
});
