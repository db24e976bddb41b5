import { GroupMark } from "./parts/group-shape";
import type { StoreGroup } from "./parts/group-shape";

type GroupLegendProps = { groups: readonly { group: StoreGroup; name: string; count?: number }[] };

/** Which shape and colour is which group. */
export const GroupLegend = ({ groups }: GroupLegendProps) => (
  <ul className="flex flex-wrap gap-x-5 gap-y-1 text-muted">
    {groups.map(({ group, name, count }) => (
      <li key={group} className="flex items-center gap-2">
        <GroupMark group={group} />
        {name}
        {count !== undefined && <span className="text-sm">{count}</span>}
      </li>
    ))}
  </ul>
);
