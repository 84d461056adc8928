// A thread of the nest: works the orders it is posted.
import { parentPort } from "node:worker_threads";
import { type NestMail, workMail } from "../core/plan/nestMail.ts";

parentPort?.on("message", (mail: NestMail) => workMail(mail));
