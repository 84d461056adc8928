// A thread of the nest: says once that it has started, then works the orders it is posted.
import { type NestMail, workMail } from "../../core/plan/nestMail.ts";

self.onmessage = (event: MessageEvent<NestMail>) => workMail(event.data);
self.postMessage("started");
