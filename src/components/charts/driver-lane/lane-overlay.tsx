import { useRef } from "react";
import { curveValueAt } from "../scale/curve-height";
import type { CurvePoint } from "../scale/curve-height";
import type { Steps } from "../scale/snap";
import type { LaneGeometry } from "./lane-geometry";
import { useSlider } from "./use-slider";

type LaneOverlayProps = {
  /** Name of the slider: "Price". */
  label: string;
  geometry: LaneGeometry;
  points: readonly CurvePoint[];
  value: number;
  /** Shown as the hollow dot; null where there is none. */
  baseline: number | null;
  /** Ends of the values that the plan's store-weeks have, where they differ. */
  mixed?: readonly [number, number];
  steps: Steps;
  valueText: string;
  readOnly?: boolean;
  onChange: (value: number) => void;
  onCommit?: (value: number) => void;
};

/** What moves while dragging: handle on the track, stem, dot on the curve, and the stretch from the baseline. */
export const LaneOverlay = (props: LaneOverlayProps) => {
  const { label, geometry, points, value, baseline, mixed, steps, valueText, readOnly = false } = props;
  const { width, height, margin, x, y, trackY } = geometry;
  const plot = useRef<HTMLDivElement>(null);
  const valueAt = (clientX: number) => {
    const left = plot.current?.getBoundingClientRect().left ?? 0;
    return x.toValue(clientX - left - margin.left);
  };
  const slider = useSlider({ value, steps, valueAt, onChange: props.onChange, onCommit: props.onCommit });
  const handleX = x.toPixel(value);
  const dotY = y.toPixel(curveValueAt(points, value).estimate);
  const baselineX = baseline === null ? null : x.toPixel(baseline);
  const stretch = mixed ? [x.toPixel(mixed[0]), x.toPixel(mixed[1])] : [baselineX ?? handleX, handleX];

  return (
    <div ref={plot} className="absolute inset-0" data-dragging={slider.isDragging || undefined}>
      <svg width={width} height={height} className="absolute inset-0" aria-hidden="true">
        <g transform={`translate(${margin.left} ${margin.top})`}>
          <line
            x1={stretch[0]}
            x2={stretch[1]}
            y1={trackY}
            y2={trackY}
            stroke="var(--driver)"
            strokeWidth="4"
            strokeLinecap="round"
            data-part="stretch"
          />
          <line
            x1={handleX}
            x2={handleX}
            y1={dotY}
            y2={trackY}
            stroke="var(--driver)"
            strokeWidth="1.5"
            data-part="stem"
          />
          {baseline !== null && baselineX !== null && (
            <circle
              cx={baselineX}
              cy={y.toPixel(curveValueAt(points, baseline).estimate)}
              r="4.75"
              fill="var(--sheet)"
              stroke="var(--driver)"
              strokeWidth="2"
              data-part="baseline"
            />
          )}
          <circle
            cx={handleX}
            cy={dotY}
            r="5.75"
            fill="var(--driver)"
            stroke="var(--sheet)"
            strokeWidth="1.5"
            data-part="dot"
          />
          {!readOnly && <HandleShape x={handleX} y={trackY} />}
        </g>
      </svg>
      {!readOnly && (
        <>
          <div
            {...slider.track}
            className="absolute touch-pan-y cursor-pointer"
            style={{ left: margin.left - 16, right: margin.right - 16, top: margin.top + trackY - 16, height: 40 }}
            data-part="track"
          />
          <div
            {...slider.track}
            role="slider"
            tabIndex={0}
            aria-label={label}
            aria-orientation="horizontal"
            aria-valuemin={steps.min}
            aria-valuemax={steps.max}
            aria-valuenow={value}
            aria-valuetext={mixed ? `mixed, ${valueText} on average` : valueText}
            onKeyDown={slider.onKeyDown}
            className="absolute h-7 w-6 touch-none cursor-grab rounded-sm active:cursor-grabbing"
            style={{ left: margin.left + handleX - 12, top: margin.top + trackY - 14 }}
          />
        </>
      )}
    </div>
  );
};

const HandleShape = ({ x, y }: { x: number; y: number }) => (
  <g transform={`translate(${x} ${y})`} data-part="handle">
    <rect
      x="-8.25"
      y="-10"
      width="16.5"
      height="20"
      rx="5.5"
      fill="var(--sheet)"
      stroke="var(--driver)"
      strokeWidth="2"
    />
    <path d="M-2.25-3.5v7M2.25-3.5v7" stroke="var(--driver)" strokeWidth="1.5" strokeLinecap="round" />
  </g>
);
