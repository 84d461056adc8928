// How large a drawing stands on the screen, for letters that stay readable whatever it is scaled by.
import { type RefObject, useEffect, useState } from "react";

/**
 * Screen pixels of one unit of a drawing that is fitted into its place as a whole; 0 before it is laid out.
 * @param width width and height of the drawing, in its own units
 */
export function useScale(svg: RefObject<SVGSVGElement | null>, width: number, height: number): number {
  const [size, setSize] = useState({ width: 0, height: 0 });
  useEffect(() => {
    const drawn = svg.current;
    if (drawn === null) return;
    const watch = new ResizeObserver(([entry]) => setSize(entry.contentRect));
    watch.observe(drawn);
    return () => watch.disconnect();
  }, [svg]);
  return Math.min(size.width / width, size.height / height);
}
