/* The number pad: its keys type into the reading's field, and the Keep key reads it back in big digits. */
"use strict";

const field = () => document.getElementById("typed");

function readBack() {
  const shown = document.querySelector("[data-shown]");
  if (shown && field()) shown.value = field().value;
}

function press(key) {
  const into = field();
  const start = into.selectionStart, end = into.selectionEnd;
  if (key === "back") {
    into.setRangeText("", start === end ? Math.max(0, start - 1) : start, end, "end");
  } else {
    into.setRangeText(key, start, end, "end");
  }
  readBack();
}

document.addEventListener("click", (event) => {
  const key = event.target.closest("[data-key]");
  if (key && field()) press(key.dataset.key);
});

/* A tablet's own keyboard would cover the pad; the field stays open to a gauge that types, and to a real keyboard. */
function ready() {
  if (field() && matchMedia("(pointer: coarse)").matches) field().inputMode = "none";
  readBack();
}

document.addEventListener("input", readBack);
document.addEventListener("htmx:load", ready);
document.addEventListener("DOMContentLoaded", ready);
