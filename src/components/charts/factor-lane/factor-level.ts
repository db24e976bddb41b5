/** One level of a driver that is picked, not slid: its multiplier against the reference level. */
export type FactorLevel = {
  value: string;
  label: string;
  /** Null where too little was seen to learn it; such a level cannot be chosen. */
  estimate: number | null;
  lower: number | null;
  upper: number | null;
  /** Weeks seen with this level. */
  weeks: number;
  /** Whether to hatch it, where that is not told by `weeks` alone: several stores, some of which hardly saw it. */
  isHardlySeen?: boolean;
};

export type LearntLevel = FactorLevel & { estimate: number; lower: number; upper: number };

export const isLearnt = (level: FactorLevel): level is LearntLevel =>
  level.estimate !== null && level.lower !== null && level.upper !== null;
