// Shows the button that opens the browser's print dialogue, which only a script can do.

const button = document.getElementById("print-button");
button.hidden = false;
button.addEventListener("click", () => window.print());
