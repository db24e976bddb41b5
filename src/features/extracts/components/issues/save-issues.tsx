import { FileDown } from "lucide-react";
import { useState } from "react";
import type { Extract } from "@shared/contract/extracts";
import { Button } from "@/components/ui/button";
import { useStatusLine } from "@/components/ui/status-line";
import { saveCsv } from "@/lib/download";
import { readAllIssues } from "../../api/extract-issues";
import type { IssueFilter } from "../../view/issue-filter";
import { issuesCsv } from "../../view/issues-csv";

/** The list as a file, for those who keep the system that the file came from. */
export const SaveIssues = ({ extract, filter }: { extract: Extract; filter: IssueFilter }) => {
  const [isSaving, setSaving] = useState(false);
  const status = useStatusLine();
  const save = async () => {
    setSaving(true);
    try {
      saveCsv(issuesCsv(await readAllIssues(extract.id, filter)), `${extract.fileName} what is wrong`);
    } catch {
      status.failed("The list could not be read to its end. Try again.");
    } finally {
      setSaving(false);
    }
  };
  return (
    <Button size="small" onClick={() => void save()} busy={isSaving}>
      <FileDown aria-hidden="true" /> Save as CSV
    </Button>
  );
};
