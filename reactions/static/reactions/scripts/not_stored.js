// Says so when a request failed, so that nobody takes for stored what is only typed; and asks who is
// logged in before a form leaves the page, so that nothing typed is lost to the log-in page.

const place = document.getElementById("not-stored");
const loggedInPage = place.dataset.loggedInPage; // only where somebody is logged in
const LOGGED_OUT = "You are logged out. Log in in another tab, then press the button again.";
const UNREACHED = "The server can't be reached. What you typed stands on this page but is not stored: wait, then press the button again.";
let mayBeLoggedOut = false;
let isLeaving = false;

function say(text) {
  const notice = document.createElement("p");
  notice.className = "notice notice-alarm";
  notice.textContent = text;
  place.replaceChildren(notice);
  notice.scrollIntoView({ block: "nearest" });
}

// Whether somebody is logged in. A new log-in has a new token, without which forms are refused.
async function takeTokenAgain() {
  const answer = await fetch(loggedInPage, { redirect: "manual" });
  if (!answer.ok) return false;
  const page = new DOMParser().parseFromString(await answer.text(), "text/html");
  const token = page.querySelector("[name=csrfmiddlewaretoken]")?.value;
  if (!token) return false;
  for (const field of document.querySelectorAll("[name=csrfmiddlewaretoken]")) field.value = token;
  document.body.setAttribute("hx-headers", JSON.stringify({ "X-CSRFToken": token }));
  mayBeLoggedOut = false;
  return true;
}

// Calls `send` where somebody is logged in, else says what to do.
async function ifLoggedIn(send) {
  try {
    if (await takeTokenAgain()) return send();
    say(`${LOGGED_OUT} What you typed stands on this page but is not stored.`);
  } catch {
    say(UNREACHED);
  }
  return undefined;
}

document.addEventListener("submit", async (event) => {
  const { target: form, submitter } = event;
  if (!loggedInPage || event.defaultPrevented || form.method !== "post") return;
  if (form.hasAttribute("data-may-leave")) {
    form.removeAttribute("data-may-leave");
    return;
  }
  event.preventDefault();
  if (isLeaving) return; // a second press
  isLeaving = true;
  isLeaving = Boolean(
    await ifLoggedIn(() => {
      form.setAttribute("data-may-leave", "");
      form.requestSubmit(submitter);
      return true;
    }),
  );
});

window.addEventListener("pageshow", () => {
  isLeaving = false;
});

document.body.addEventListener("htmx:confirm", (event) => {
  if (!mayBeLoggedOut) return;
  event.preventDefault();
  ifLoggedIn(() => event.detail.issueRequest(true));
});

document.body.addEventListener("htmx:sendError", () => say(UNREACHED));

document.body.addEventListener("htmx:responseError", (event) => {
  const status = event.detail.xhr.status;
  mayBeLoggedOut = Boolean(loggedInPage) && (status === 401 || status === 403);
  const reasons = {
    401: LOGGED_OUT,
    403: "You may not change this, or you were logged out meanwhile.",
    404: "This is no longer here.",
  };
  const reason = reasons[status] ?? "Something went wrong on the server.";
  say(`${reason} What you typed stands on this page but is not stored (answer ${status}).`);
});

document.body.addEventListener("htmx:afterSwap", () => place.replaceChildren());
