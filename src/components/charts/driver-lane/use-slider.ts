import { useRef, useState } from "react";
import type { KeyboardEvent, PointerEvent } from "react";
import { snap, valueAfterKey } from "../scale/snap";
import type { Steps } from "../scale/snap";

type SliderOptions = {
  value: number;
  steps: Steps;
  /** Value at a horizontal place on the screen. */
  valueAt: (clientX: number, track: Element) => number;
  /** On every move; must be cheap. */
  onChange: (value: number) => void;
  /** When a move is finished: pointer let go, key pressed. */
  onCommit?: (value: number) => void;
};

/** Pointer and keyboard of a slider whose track is a chart's own axis. */
export const useSlider = ({ value, steps, valueAt, onChange, onCommit }: SliderOptions) => {
  const [isDragging, setDragging] = useState(false);
  const latest = useRef(value);

  const moveTo = (event: PointerEvent<Element>) => {
    const next = snap(valueAt(event.clientX, event.currentTarget), steps);
    if (next === latest.current) return;
    latest.current = next;
    onChange(next);
  };
  const finish = (event: PointerEvent<Element>) => {
    if (!isDragging) return;
    if (event.currentTarget.hasPointerCapture?.(event.pointerId))
      event.currentTarget.releasePointerCapture(event.pointerId);
    setDragging(false);
    onCommit?.(latest.current);
  };
  return {
    isDragging,
    track: {
      onPointerDown: (event: PointerEvent<Element>) => {
        if (event.button !== 0) return;
        event.preventDefault();
        event.currentTarget.setPointerCapture?.(event.pointerId);
        latest.current = value;
        setDragging(true);
        moveTo(event);
      },
      onPointerMove: (event: PointerEvent<Element>) => {
        if (isDragging) moveTo(event);
      },
      onPointerUp: finish,
      onPointerCancel: finish,
    },
    onKeyDown: (event: KeyboardEvent) => {
      if (event.ctrlKey || event.metaKey || event.altKey) return;
      const next = valueAfterKey(event.key, value, steps);
      if (next === undefined) return;
      event.preventDefault();
      if (next === value) return;
      onChange(next);
      onCommit?.(next);
    },
  };
};
