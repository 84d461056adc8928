// A group that is folded away until something in it calls for it. It unfolds by itself and folds only by hand: what is taken out of a
// group must not fold it shut under the hand that does so.
import { useState } from "react";

/** `open`: whether it is called for; `words`: what stands on it. */
export function Fold(props: {
  className: string;
  path?: string;
  open: boolean;
  words: React.ReactNode;
  children: React.ReactNode;
}) {
  const [shown, setShown] = useState(props.open);
  const [called, setCalled] = useState(props.open);
  if (props.open !== called) {
    setCalled(props.open);
    if (props.open) setShown(true);
  }
  return (
    <details
      className={props.className}
      data-path={props.path}
      open={shown}
      onToggle={(e) => setShown(e.currentTarget.open)}
    >
      <summary>{props.words}</summary>
      {props.children}
    </details>
  );
}
