// Marks a field as faulty as soon as the server has put an error in its place, and clears it again.

function mark() {
  for (const place of document.querySelectorAll("[data-error-of]")) {
    const field = document.getElementById(place.dataset.errorOf);
    if (!field) continue;
    if (place.childElementCount) {
      field.setAttribute("aria-invalid", "true");
      field.setAttribute("aria-errormessage", place.id);
    } else {
      field.removeAttribute("aria-invalid");
      field.removeAttribute("aria-errormessage");
    }
  }
}

document.body.addEventListener("htmx:afterSettle", mark);
mark();
