/** What was, is and was undone; the present is what the page shows and saves. */
export type History<State> = { past: readonly State[]; present: State; future: readonly State[] };

const mostSteps = 200;

export const beginHistory = <State>(present: State): History<State> => ({ past: [], present, future: [] });

/** A new present; what had been undone is gone. An equal state (by reference) is no step. */
export const stepTo = <State>(history: History<State>, present: State): History<State> =>
  present === history.present
    ? history
    : { past: [...history.past, history.present].slice(-mostSteps), present, future: [] };

export const undo = <State>({ past, present, future }: History<State>): History<State> => {
  const before = past.at(-1);
  return before === undefined ? { past, present, future } : { past: past.slice(0, -1), present: before, future: [present, ...future] };
};

export const redo = <State>({ past, present, future }: History<State>): History<State> => {
  const [next, ...rest] = future;
  return next === undefined ? { past, present, future } : { past: [...past, present], present: next, future: rest };
};
