// A button that begins long work or stops it. The one comes to stand where the other stood: the second press of a double click and a
// key still held down were meant for the one that is gone, and must not begin anew what was just ended.

/** One press, one act. */
export function PressButton(props: {
  onPress: () => void;
  className?: string;
  disabled?: boolean;
  children: React.ReactNode;
}) {
  return (
    <button
      type="button"
      className={props.className}
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
