// Progress a worker tells: a step as soon as it begins, numbers that only go on a few times a second.

const TICKS = 10;

/** @param tell what is told goes there; `begin`: what was done last is over, however long the first word of the next takes */
export function createTeller(tell: (share: number, words: string) => void) {
  let share = 0;
  let step = "";
  let told = Number.NEGATIVE_INFINITY;
  const say = (words: string) => {
    told = performance.now();
    tell(share, words);
  };
  return {
    begin: (): void => {
      step = "";
      say("");
    },
    tell: (now: number, words: string): void => {
      share = now;
      const [next] = words.split(/\d/, 1);
      if (next === step && performance.now() - told < 1000 / TICKS) return;
      step = next;
      say(words);
    },
  };
}
