import type { Extract } from "@shared/contract/extracts";
import { Button } from "@/components/ui/button";
import { useStatusLine } from "@/components/ui/status-line";
import { useExtractAction } from "../../api/extract-actions";
import { problemSentence } from "../../view/problem-sentence";

/** Checks the kept file anew, against what the catalogue has by now. */
export const CheckAgain = ({ extract }: { extract: Extract }) => {
  const action = useExtractAction(extract.id);
  const status = useStatusLine();
  if (!extract.may.check) return null;
  return (
    <Button
      size="small"
      busy={action.isPending}
      onClick={() => action.mutate({ name: "check" }, { onError: (error) => status.failed(problemSentence(error)) })}
    >
      Check again
    </Button>
  );
};
