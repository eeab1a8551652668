// Folds what would push the hits out of sight on a narrow screen.

if (window.matchMedia("(max-width: 62rem)").matches) {
  for (const part of document.querySelectorAll("[data-fold-when-narrow]")) part.open = false;
}
