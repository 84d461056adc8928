// What is a button by its role alone (a shape of a drawing) hears Enter and Space as a button of the browser does.

/** A hearer of keys that does the act where the key presses a button. */
export function pressed(act: () => void): (e: React.KeyboardEvent) => void {
  return (e) => {
    if (e.key !== "Enter" && e.key !== " ") return;
    e.preventDefault();
    act();
  };
}
