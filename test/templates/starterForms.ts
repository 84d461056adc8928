// Which generator makes which starter's mesh.
import { type MadeForm, makeSaddle } from "./makeForms.ts";

export const STARTER_FORMS: { name: string; head: string; make: () => MadeForm }[] = [
  {
    name: "market-hall",
    head: "Market hall, east canopy: minimal surface on four straight clamped edges, 12 x 9 m",
    make: () => makeSaddle([12, 9], [3.4, 5.6, 3.0, 5.2], [48, 36]),
  },
];
