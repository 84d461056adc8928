// The service worker: the page works without a line once it was loaded. A newer version is taken over when the user says so.
import { notify } from "../store/bookStore.ts";

let waiting: ServiceWorker | null = null;

/** Registers it where the browser can. */
export async function goOffline(): Promise<void> {
  if (!("serviceWorker" in navigator)) return;
  try {
    const registration = await navigator.serviceWorker.register("./service-worker.js");
    const tell = (worker: ServiceWorker | null) => {
      if (worker === null || navigator.serviceWorker.controller === null) return;
      waiting = worker;
      notify("update", "A newer Seamstay is ready.");
    };
    tell(registration.waiting);
    registration.addEventListener("updatefound", () => {
      const next = registration.installing;
      next?.addEventListener("statechange", () => {
        if (next.state === "installed") tell(next);
      });
    });
  } catch {
    // Without it the page works as long as it is served.
  }
}

/** Takes the waiting version over and loads the page anew. */
export function takeUpdate(): void {
  if (waiting === null) return;
  navigator.serviceWorker.addEventListener("controllerchange", () => location.reload(), { once: true });
  waiting.postMessage("take-over");
}
