/** Groups of stores by response; each has a colour and a shape, so that neither is needed alone. */
export type StoreGroup = 1 | 2 | 3 | 4 | 5 | 6;

export const groupNames: Record<StoreGroup, string> = {
  1: "circle",
  2: "square",
  3: "triangle",
  4: "diamond",
  5: "triangle pointing down",
  6: "cross",
};

const shapes: Record<StoreGroup, string> = {
  1: "M-4.2 0a4.2 4.2 0 1 0 8.4 0a4.2 4.2 0 1 0 -8.4 0Z",
  2: "M-3.8-3.8h7.6v7.6h-7.6Z",
  3: "M0-4.6 4.6 3.7H-4.6Z",
  4: "M0-5 5 0 0 5-5 0Z",
  5: "M0 4.6-4.6-3.7H4.6Z",
  6: "M-1.5-4.5h3v3h3v3h-3v3h-3v-3h-3v-3h3Z",
};

/** A group's mark inside a drawing, centred on its place. */
export const GroupShape = ({ group, x = 0, y = 0 }: { group: StoreGroup; x?: number; y?: number }) => (
  <path
    data-group={group}
    d={shapes[group]}
    transform={`translate(${x} ${y})`}
    fill="var(--group)"
    aria-hidden="true"
  />
);

/** A group's mark in text. */
export const GroupMark = ({ group }: { group: StoreGroup }) => (
  <svg viewBox="-6 -6 12 12" className="inline-block size-3 shrink-0" aria-hidden="true">
    <GroupShape group={group} />
  </svg>
);
