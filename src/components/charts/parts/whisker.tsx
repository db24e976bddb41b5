type WhiskerProps = { x: number; lower: number; upper: number; cap?: number };

/** An interval up and down, in ink, with a rim of the ground so that it shows on any bar. */
export const Whisker = ({ x, lower, upper, cap = 0 }: WhiskerProps) => {
  const path = `M${x} ${lower}V${upper}${cap ? `M${x - cap} ${lower}h${2 * cap}M${x - cap} ${upper}h${2 * cap}` : ""}`;
  return (
    <g data-part="whisker" fill="none" aria-hidden="true">
      <path d={path} stroke="var(--sheet)" strokeWidth="4" strokeOpacity="0.75" />
      <path d={path} stroke="var(--ink)" strokeWidth="1.75" />
    </g>
  );
};
