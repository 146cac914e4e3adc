// Starts the page, and says so in a sentence if it cannot start or stops.
import init from "./page.js";

const stopped = (why) => {
  const place = document.getElementById("stopped");
  place.textContent =
    "Something went wrong inside this page and it stopped. What was kept on this device is still there: reload the page. (" +
    why + ")";
  place.hidden = false;
};

addEventListener("error", (event) => stopped(event.message));
addEventListener("unhandledrejection", (event) => stopped(event.reason));

init({ module_or_path: new URL("page_bg.wasm", import.meta.url) }).catch((why) => {
  stopped(why);
});

if ("serviceWorker" in navigator && window.isSecureContext) {
  // Without the worker the page still runs; it only cannot be opened with no connection.
  navigator.serviceWorker.register("offline.js").catch(() => {});
}
