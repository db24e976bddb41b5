import { useLayoutEffect, useRef, useState } from "react";
import type { RefObject } from "react";

/** An element's width in pixels, followed as it changes; `fallback` where nothing can be measured. */
export const useElementWidth = <E extends HTMLElement>(fallback: number): [RefObject<E | null>, number] => {
  const element = useRef<E>(null);
  const [width, setWidth] = useState(fallback);
  useLayoutEffect(() => {
    const node = element.current;
    if (!node || typeof ResizeObserver === "undefined") return;
    const measure = (measured: number) => {
      if (measured > 0) setWidth(Math.floor(measured));
    };
    measure(node.getBoundingClientRect().width);
    const observer = new ResizeObserver(([entry]) => measure(entry.contentRect.width));
    observer.observe(node);
    return () => observer.disconnect();
  }, []);
  return [element, width];
};
