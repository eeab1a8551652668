// Gives each target a slider beside its field, and fills in a usual addend when it is chosen.
// Without script the fields and the buttons do the same.

function slide(field) {
  const [min, max, step] = field.dataset.slide.split(" ");
  const slider = document.createElement("input");
  Object.assign(slider, { type: "range", min, max, step });
  slider.setAttribute("aria-label", `${field.labels[0]?.textContent ?? "Target"}, by slider`);
  slider.value = field.value;
  slider.addEventListener("input", () => {
    field.value = slider.value;
    field.dispatchEvent(new Event("input", { bubbles: true }));
  });
  field.addEventListener("input", () => {
    if (document.activeElement !== slider) slider.value = field.value;
  });
  field.after(slider);
  field.dataset.slides = "";
}

function fill(select) {
  select.addEventListener("change", () => {
    const addend = document.getElementById("plan_addend");
    if (!select.value || !addend) return;
    addend.value = select.value;
    const name = document.getElementById("plan_addend_name");
    name.value = select.selectedOptions[0].textContent;
    addend.dispatchEvent(new Event("input", { bubbles: true }));
    addend.dispatchEvent(new Event("change", { bubbles: true }));
  });
  select.dataset.fills = "";
}

// What is typed while the form is being filled anew must not be lost with the old form.
const meanwhile = new Map();
const isFillingAnew = (event) => event.detail.target?.id === "planner";

document.addEventListener("input", (event) => {
  if (event.target.closest("#planner") && event.target.name) {
    meanwhile.set(event.target.name, event.target.value);
  }
});

document.body.addEventListener("htmx:beforeRequest", (event) => {
  if (isFillingAnew(event)) meanwhile.clear();
});

document.body.addEventListener("htmx:afterSettle", (event) => {
  if (!isFillingAnew(event)) return;
  for (const [name, value] of meanwhile) {
    const field = document.getElementById("planner").elements[name];
    if (!field || field.value === value) continue;
    field.value = value;
    (field.length === undefined ? field : field[0]).dispatchEvent(
      new Event("input", { bubbles: true }),
    );
  }
  meanwhile.clear();
});

function mount() {
  for (const field of document.querySelectorAll("[data-slide]:not([data-slides])")) slide(field);
  for (const select of document.querySelectorAll("#plan_usual_addend:not([data-fills])")) fill(select);
  for (const button of document.querySelectorAll("[data-without-script]")) button.hidden = true;
}

document.body.addEventListener("htmx:afterSettle", mount);
mount();
