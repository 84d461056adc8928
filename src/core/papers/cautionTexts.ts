// Standing words of the sheets: cautions before the work they belong to, and what this tool leaves to the engineer. The one
// source of both. All of it common practice, not taken from a code. Signal words after ANSI Z535.6 (check-values 7.3), graded by
// the worst credible outcome; each caution says hazard, consequence, how to avoid, in that order.

/** Papers a caution can stand on. */
export type CautionPaper = "schedule" | "cables" | "hardware" | "rolls" | "panels" | "seams" | "findings";

export interface Caution {
  id: string;
  signal: "DANGER" | "WARNING" | "CAUTION" | "NOTICE";
  papers: readonly CautionPaper[];
  hazard: string;
  consequence: string;
  avoid: string;
}

/** All of them, the gravest first. */
export const CAUTIONS: readonly Caution[] = [
  {
    id: "cable-release",
    signal: "DANGER",
    papers: ["schedule", "cables", "findings"],
    hazard: "A cable or turnbuckle under tension that comes free whips along its own line.",
    consequence: "It kills or maims whoever stands in that line.",
    avoid:
      "Stand beside the line, never in it or in the bight; nobody below. Secure the far end before loosening. Release tension stage by stage, never by cutting.",
  },
  {
    id: "fall",
    signal: "DANGER",
    papers: ["schedule", "findings"],
    hazard: "Work at height on edges, masts and cloth that gives way underfoot.",
    consequence: "A fall kills.",
    avoid:
      "Work from a platform or clipped on to a point the engineer has named. Cloth, edge cables and clamp bars are no anchor points.",
  },
  {
    id: "wind-lift",
    signal: "DANGER",
    papers: ["schedule", "findings"],
    hazard: "Slack or half-tensioned cloth is a sail: it lifts and flogs; a free membrane already lifts in a breeze.",
    consequence: "People are thrown, masts pulled over, the cloth torn.",
    avoid:
      "Unfold only as much as can be secured. Do not start, and stop and tie down, above the wind limit set by the engineer. Measure gusts at the height of the roof. Agree a storm state that can be reached within the hour.",
  },
  {
    id: "suspended-load",
    signal: "WARNING",
    papers: ["schedule", "findings"],
    hazard: "Folded cloth, masts and clamp bars hang over the work.",
    consequence: "A dropped load can kill.",
    avoid:
      "Nobody under the load. Lift the cloth on its lifting points or a beam, never by a pocket or a corner plate alone.",
  },
  {
    id: "order-of-steps",
    signal: "WARNING",
    papers: ["schedule"],
    hazard:
      "Forces on the way can be higher than the final ones: a cable pulled first may carry several times its final force.",
    consequence: "Cable, fitting, anchor or mast can fail.",
    avoid:
      "Keep the order and the lengths of the steps. Read after every step. Stop when a reading lies outside its window and ask the engineer.",
  },
  {
    id: "thread-engagement",
    signal: "WARNING",
    papers: ["schedule", "hardware"],
    hazard: "A turnbuckle turned out too far holds by a few threads only.",
    consequence: "It can pull apart without warning.",
    avoid:
      "Keep at least one thread diameter in the body at each end, seen in the sight hole. Lock both ends after the last move and mark them with paint.",
  },
  {
    id: "reading-force",
    signal: "WARNING",
    papers: ["schedule"],
    hazard:
      "A frequency read in the wrong mode, or a length taken between the wrong points, gives a force that is a quarter or four times the real one.",
    consequence: "The crew pulls on towards breaking.",
    avoid:
      "Read twice by two methods at the first stage. Use free spans only, never a cable in its pocket. Compare with the tape.",
  },
  {
    id: "wet-surface",
    signal: "WARNING",
    papers: ["schedule"],
    hazard: "Wet or dewy coated cloth is slippery; nothing shows where it is not held.",
    consequence: "A slip ends in a fall.",
    avoid: "Nobody walks on the cloth unless the engineer has released it, and then clipped on, in soft clean shoes.",
  },
  {
    id: "cutting-table",
    signal: "WARNING",
    papers: ["rolls"],
    hazard: "The cutting head starts without warning and the blade is bare.",
    consequence: "Deep cuts, crushed hands.",
    avoid:
      "Hands off the table while it is live. Lock it out before clearing a jam or changing a blade. Wear cut-proof gloves when handling blades.",
  },
  {
    id: "stamp",
    signal: "WARNING",
    papers: ["schedule", "cables", "hardware", "rolls", "panels", "seams", "findings"],
    hazard: "A sheet of another revision looks like this one.",
    consequence: "Parts of two designs meet in the air.",
    avoid:
      "Compare issue letter and revision on every sheet in hand with the findings sheet. Destroy superseded sheets. A sheet stamped NOT FOR ISSUE is not to be built from.",
  },
  {
    id: "cold",
    signal: "CAUTION",
    papers: ["schedule", "rolls"],
    hazard: "Coated cloth is stiff and brittle in the cold and cracks at folds.",
    consequence: "Hands are caught by cloth that springs back; the coating leaks later.",
    avoid:
      "Do not unfold or pull below the temperature set by the engineer and the cloth's maker; one practitioner's rule is 10 degC.",
  },
  {
    id: "heavy-pack",
    signal: "CAUTION",
    papers: ["findings", "schedule"],
    hazard: "Folded cloth is heavy and slides.",
    consequence: "It crushes hands and feet and strains backs.",
    avoid:
      "Lift packs with slings and a spreader sized for the weight; wear gloves and shoes with caps; do not stand on folded cloth.",
  },
  {
    id: "welding",
    signal: "CAUTION",
    papers: ["findings", "panels"],
    hazard: "Hot-air and high-frequency welders burn, and fumes of coated cloth irritate.",
    consequence: "Burns, sore eyes and lungs.",
    avoid:
      "Draw off fumes, keep hands off the nozzle and the electrode, follow the maker's instructions of machine and cloth.",
  },
  {
    id: "face-and-warp",
    signal: "NOTICE",
    papers: ["rolls", "panels", "findings"],
    hazard:
      "Outlines are drawn on the outer face with the warp along the roll. A roll laid face down mirrors every panel.",
    consequence: "The whole roof is cut wrong and the cloth is lost.",
    avoid:
      "Check the face of the first roll against the mark on the sheet. Never mirror a panel, never turn one by anything but 180 degrees.",
  },
  {
    id: "check-bar",
    signal: "NOTICE",
    papers: ["rolls", "panels"],
    hazard: "Cut files carry no sure unit: a file read in inches or scaled by a printer looks the same.",
    consequence: "Cloth is cut to the wrong size.",
    avoid:
      "Measure the 1000 mm bar on the table before the first cut. Check the lengths on the panel card before welding.",
  },
  {
    id: "weld-release",
    signal: "NOTICE",
    papers: ["panels", "seams"],
    hazard: "A weld that looks sound can peel.",
    consequence: "A seam opens under load.",
    avoid:
      "Weld and peel the test piece for every batch, machine and shift before the first seam. Release no panel whose lengths differ from its card.",
  },
  {
    id: "rest-before-cutting",
    signal: "NOTICE",
    papers: ["rolls"],
    hazard: "Cloth fresh off the roll is still stretched and creeps back on the table.",
    consequence: "Panels come out short.",
    avoid: "Unroll, let it rest, then cut. Cut the panels of one surface from one batch, at one temperature.",
  },
  {
    id: "glass-folds",
    signal: "NOTICE",
    papers: ["rolls", "panels", "schedule", "findings"],
    hazard: "Glass cloth breaks where it is folded sharply, dragged or trodden on.",
    consequence: "Yarns break unseen and the cloth tears at prestress.",
    avoid: "Roll it on tubes or pad every fold. No dragging, no walking on folded cloth.",
  },
];

/** What the plan does not hold and the engineer must supply or decide. */
export const ENGINEER_SUPPLIES: readonly string[] = [
  "Design for wind, snow, ponding, seismic and accidental loads to the code in force where the roof stands. This plan is made for prestress only and checks none of them.",
  "Design forces, and from them the size of every cable, fitting, turnbuckle, clamp, mast, anchor and foundation. No size is chosen here from prestress.",
  "The strength of the cloth and of every weld at the design temperature, with the factors of the code in force; a weld trial each day of welding.",
  "Biaxial tests of the batches in use and the compensation drawn from them, where the findings say that stiffness values or defaults were taken.",
  "Drainage: the slope everywhere under load, and what happens when an outlet is blocked.",
  "Limits of wind, temperature and force for lifting and tensioning, the storm state, and who may stop the work.",
  "Measured positions of the anchors before cloth is cut.",
  "Whether this plan may be built. Local law, codes and the licensed engineer decide; a sheet without a stamp only means that no stop was found here.",
];
