import { FileDown } from "lucide-react";
import type { Extract } from "@shared/contract/extracts";
import { buttonStyle } from "@/components/ui/button-style";
import { fileNameOf } from "@/lib/download";
import { issuesCsvAddress } from "../../api/extract-issues";
import type { IssueFilter } from "../../view/issue-filter";

/** The list as a file, for those who keep the system that the file came from. */
export const SaveIssues = ({ extract, filter }: { extract: Extract; filter: IssueFilter }) => (
  <a
    href={issuesCsvAddress(extract.id, filter)}
    download={`${fileNameOf(`${extract.fileName} what is wrong`)}.csv`}
    className={buttonStyle({ size: "small" })}
  >
    <FileDown aria-hidden="true" /> Save as CSV
  </a>
);
