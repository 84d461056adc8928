// Which generator makes which starter's mesh.
import type { MadeForm } from "./madeForm.ts";
import { makeCone, makeSaddle, makeSail } from "./makeForms.ts";

export const STARTER_FORMS: { name: string; head: string; make: () => MadeForm }[] = [
  {
    name: "market-hall",
    head: "Market hall, east canopy: minimal surface on four straight clamped edges, 12 x 9 m",
    make: () => makeSaddle([12, 9], [3.4, 5.6, 3.0, 5.2], [48, 36]),
  },
  {
    name: "boat-shed",
    head: "Boat shed, bay 2: minimal surface hung from four corners by edge cables of 24, 21, 24 and 21 kN at 2 kN/m",
    make: () =>
      makeSail(
        [
          [-5, -4, 2.6],
          [5, -4, 4.4],
          [5, 4, 2.6],
          [-5, 4, 4.4],
        ],
        [12, 10.5, 12, 10.5],
        [48, 40],
      ),
  },
  {
    name: "bandstand",
    head: "Bandstand on the green: minimal surface from a ring of 3.6 m down to four edge cables of 25 kN at 2 kN/m",
    make: () =>
      makeCone(
        { centre: [0, 0, 4.8], radius: 1.8 },
        [
          { name: "pier-sw", at: [-5, -5, 3] },
          { name: "pier-se", at: [5, -5, 3] },
          { name: "mast-ne", at: [5, 5, 3] },
          { name: "pier-nw", at: [-5, 5, 3] },
        ],
        [
          { name: "south", pull: 12.5 },
          { name: "east", pull: 12.5 },
          { name: "north", pull: 12.5 },
          { name: "west", pull: 12.5 },
        ],
        [20, 22],
        (-3 * Math.PI) / 4,
      ),
  },
];
