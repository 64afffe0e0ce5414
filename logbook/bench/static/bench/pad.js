/* The number pad: its keys type into the reading's field, and the Keep key reads it back in big digits. */
"use strict";

const field = () => document.getElementById("typed");

function readBack() {
  const shown = document.querySelector("[data-shown]");
  if (shown && field()) shown.value = field().value;
}

/* Always at the end, never at the cursor: browsers differ in where it stands while a key of the pad has the focus,
   and a cursor left at the front would turn 0.18 into 81.0. */
function press(key) {
  const into = field();
  into.value = key === "back" ? into.value.slice(0, -1) : into.value + key;
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
