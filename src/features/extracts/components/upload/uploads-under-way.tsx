import { Link } from "react-router-dom";
import { countOf } from "@/lib/format/number";
import { formatPercent } from "@/lib/format/percent";
import { paths } from "@/lib/paths";
import { useUploads } from "../../api/uploads";
import { uploadsSummary } from "../../view/uploads-summary";

/** On every page while files go up: how many, how far, and the way back to them. */
export const UploadsUnderWay = () => {
  const summary = uploadsSummary(useUploads());
  if (!summary) return null;
  const { count, share } = summary;
  return (
    <Link
      to={paths.extracts.href()}
      className="relative inline-flex h-8 items-center overflow-hidden rounded-sm bg-accent-soft px-3 text-sm font-medium whitespace-nowrap text-accent"
    >
      {countOf(count, "upload")} · {formatPercent(share)}
      <span aria-hidden="true" className="absolute bottom-0 left-0 h-0.5 bg-accent" style={{ width: `${share * 100}%` }} />
    </Link>
  );
};
