import { useState } from "react";

type ScenarioNameProps = { name: string; readOnly: boolean; onRename: (name: string) => void };

/** The scenario's name as the page's heading, changed where it stands. */
export const ScenarioName = ({ name, readOnly, onRename }: ScenarioNameProps) => {
  const [draft, setDraft] = useState<string | null>(null);
  if (readOnly) return <>{name}</>;
  const finish = () => {
    const next = draft?.trim();
    setDraft(null);
    if (next && next !== name) onRename(next);
  };
  return (
    <input
      aria-label="Name of the scenario"
      value={draft ?? name}
      maxLength={120}
      size={Math.max(12, (draft ?? name).length)}
      onChange={(event) => setDraft(event.target.value)}
      onBlur={finish}
      onKeyDown={(event) => {
        if (event.key === "Enter") event.currentTarget.blur();
        if (event.key === "Escape") setDraft(null);
      }}
      className="-ml-2 max-w-full rounded-sm border border-transparent bg-transparent px-2 font-semibold text-ellipsis hover:border-control focus:border-control"
    />
  );
};
