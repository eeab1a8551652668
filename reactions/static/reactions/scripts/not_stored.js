// Says so when a request failed, so that nobody takes for stored what is only typed.

const place = document.getElementById("not-stored");

function say(text) {
  const notice = document.createElement("p");
  notice.className = "notice notice-alarm";
  notice.textContent = text;
  place.replaceChildren(notice);
  notice.scrollIntoView({ block: "nearest" });
}

document.body.addEventListener("htmx:sendError", () => {
  say("The server can't be reached. What you typed stands on this page but is not stored: wait, then press the button again.");
});

document.body.addEventListener("htmx:responseError", (event) => {
  const status = event.detail.xhr.status;
  const reasons = {
    401: "You are logged out. Log in in another tab, then press the button again.",
    403: "You may not change this, or you were logged out meanwhile.",
    404: "This is no longer here.",
  };
  const reason = reasons[status] ?? "Something went wrong on the server.";
  say(`${reason} What you typed stands on this page but is not stored (answer ${status}).`);
});

document.body.addEventListener("htmx:afterSwap", () => place.replaceChildren());
