// Keeps every file of the page on the device, so that it opens with no connection.
// The build writes the exact list of files with their SHA-256, and a version over them all.
const FILES = "__FILES__";
const VERSION = "__VERSION__";
const CACHE = "tubewright-" + VERSION;

const hex = (buffer) =>
  Array.from(new Uint8Array(buffer), (byte) => byte.toString(16).padStart(2, "0")).join("");

// All files or none: a page of two versions would be worse than the old one.
const fetchAll = async () => {
  const cache = await caches.open(CACHE);
  await Promise.all(
    FILES.map(async ([name, wanted]) => {
      const answer = await fetch(name, { cache: "no-cache" });
      if (!answer.ok) throw new Error(name + ": " + answer.status);
      const body = await answer.clone().arrayBuffer();
      const found = hex(await crypto.subtle.digest("SHA-256", body));
      if (found !== wanted) throw new Error(name + " is not the file this version was built with");
      await cache.put(name, answer);
    }),
  );
};

self.addEventListener("install", (event) => event.waitUntil(fetchAll()));

self.addEventListener("activate", (event) =>
  event.waitUntil(
    (async () => {
      for (const name of await caches.keys()) {
        if (name.startsWith("tubewright-") && name !== CACHE) await caches.delete(name);
      }
      await self.clients.claim();
    })(),
  ),
);

self.addEventListener("fetch", (event) => {
  const address = new URL(event.request.url);
  if (event.request.method !== "GET" || address.origin !== self.location.origin) return;
  event.respondWith(
    (async () => {
      const cache = await caches.open(CACHE);
      const kept = await cache.match(event.request, { ignoreSearch: true });
      return kept ?? fetch(event.request);
    })(),
  );
});
