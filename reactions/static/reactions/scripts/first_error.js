// Takes the person to the first error of a part that came back not stored.

const wanted = "[data-first-error], [aria-invalid=true]";

function goTo(place) {
  const first = place?.querySelector(wanted);
  if (!first) return;
  first.closest("details")?.setAttribute("open", "");
  first.focus();
}

document.body.addEventListener("htmx:afterSettle", (event) => {
  const status = event.detail.xhr?.status;
  if (status === 409 || status === 422) goTo(document.getElementById(event.detail.target.id));
});

goTo(document.querySelector("main"));
