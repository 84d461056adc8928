// What is pointed at lights up in every view: with the pointer over it, or the focus in it.
import { bookStore } from "../store/bookStore.ts";

const point = (pointed: string | null) => bookStore.setState({ pointed });

/** Handlers of the element that stands for a thing of the roof. */
export function pointing(id: string) {
  const on = () => point(id);
  const off = () => point(null);
  return { onPointerEnter: on, onPointerLeave: off, onFocus: on, onBlur: off };
}
