// A button that begins something or ends it. The one comes to stand where the other stood: the second press of a double click and a key
// still held down were meant for the one that is gone, and must not undo what was just done, or do it twice.

/** One press, one act. */
export function PressButton(props: {
  onPress: () => void;
  className?: string;
  disabled?: boolean;
  label?: string;
  /** For a button that stays in. */
  pressed?: boolean;
  children: React.ReactNode;
}) {
  return (
    <button
      type="button"
      className={props.className}
      aria-label={props.label}
      aria-pressed={props.pressed}
      disabled={props.disabled}
      onClick={(e) => {
        if (e.detail < 2) props.onPress();
      }}
      onKeyDown={(e) => {
        if (e.repeat) e.preventDefault();
      }}
    >
      {props.children}
    </button>
  );
}
