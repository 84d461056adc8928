// Keeps the built page for work without a line. The build puts VERSION and FILES in front of this text.
// A new version waits until the page says so: work in an open tab is never cut off. Nothing but the page's own files is kept.
const CACHE = `seamstay-${VERSION}`;

self.addEventListener("install", (event) => {
  event.waitUntil(
    caches.open(CACHE).then((cache) => cache.addAll(FILES.map((file) => new Request(file, { cache: "reload" })))),
  );
});

self.addEventListener("activate", (event) => {
  event.waitUntil(
    caches
      .keys()
      .then((names) =>
        Promise.all(names.filter((n) => n.startsWith("seamstay-") && n !== CACHE).map((n) => caches.delete(n))),
      )
      .then(() => self.clients.claim()),
  );
});

self.addEventListener("message", (event) => {
  if (event.data === "take-over") self.skipWaiting();
});

self.addEventListener("fetch", (event) => {
  const url = new URL(event.request.url);
  if (event.request.method !== "GET" || url.origin !== self.location.origin) return;
  const scope = new URL(self.registration.scope).pathname;
  const path = url.pathname.slice(scope.length);
  // What the command line hands over is never kept.
  if (path.startsWith("opened")) return;
  const name = path === "" || path === "index.html" ? "./" : path;
  event.respondWith(
    caches
      .open(CACHE)
      .then((cache) =>
        cache.match(new URL(name, self.registration.scope)).then((kept) => kept ?? fetch(event.request)),
      ),
  );
});
