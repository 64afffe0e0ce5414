// A gauge that types its reading ends it with Enter. Where a form decides or signs, an Enter that follows a digit
// within half a second is the gauge's, not the person's: it does nothing.
(() => {
  "use strict";
  const NOT_A_PERSON = 500; // milliseconds
  let lastDigit = -Infinity;
  document.addEventListener("keydown", (event) => {
    if (event.key >= "0" && event.key <= "9" && event.key.length === 1) {
      lastDigit = event.timeStamp;
    } else if (event.key === "Enter" && event.timeStamp - lastDigit < NOT_A_PERSON) {
      event.preventDefault();
      event.stopPropagation();
    }
  }, true);
})();
