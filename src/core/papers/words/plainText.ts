// Names and sentences made fit for one printed line: whatever was typed, no control character reaches a file.

// C0 and C1 controls, line and paragraph separators: each stands for a break, so it becomes a space.
const BREAKS = /[\p{Cc}\u2028\u2029]+/gu;
// Turning marks would reorder the line around them; lone surrogates and non-characters are refused by XML and UTF-8.
const TURNING = /[\u200e\u200f\u202a-\u202e\u2066-\u2069\ufeff]/gu;
const BROKEN = /[\p{Cs}\ufffe\uffff]/gu;

/** One line of text without control characters, turning marks or broken characters; runs of spaces become one. */
export function plainText(text: string): string {
  return text.replace(BREAKS, " ").replace(TURNING, "").replace(BROKEN, "\ufffd").replace(/ +/g, " ").trim();
}
