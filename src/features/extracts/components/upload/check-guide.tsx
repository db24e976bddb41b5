import { useQuery } from "@tanstack/react-query";
import { useState } from "react";
import { QueryView } from "@/components/ui/query-view";
import { LoadingState } from "@/components/ui/skeleton";
import { checkRulesQuery } from "../../api/check-rules";

const severities = [
  { severity: "error", heading: "Errors: the row is left out" },
  { severity: "warning", heading: "Warnings: the row is used" },
] as const;

/** Everything a file is checked for, for people who make one. Asked for when it is opened. */
export const CheckGuide = () => {
  const [isOpen, setOpen] = useState(false);
  const query = useQuery({ ...checkRulesQuery(), enabled: isOpen });
  return (
    <details className="mt-3 print:hidden" onToggle={(event) => setOpen(event.currentTarget.open)}>
      <summary className="w-fit cursor-pointer rounded-xs text-sm font-medium text-accent">What its rows are checked for</summary>
      <div className="mt-3">
        <QueryView
          query={query}
          loading="Reading the rules"
          failure="The rules could not be read"
          skeleton={<LoadingState label="Reading the rules" rows={3} />}
        >
          {(rules) => (
            <div className="grid gap-6 text-sm md:grid-cols-2">
              {severities.map(({ severity, heading }) => (
                <section key={severity}>
                  <h3 className="font-semibold">{heading}</h3>
                  <dl className="mt-2 flex flex-col gap-2">
                    {rules
                      .filter((rule) => rule.severity === severity)
                      .map(({ rule, reason, remedy }) => (
                        <div key={rule}>
                          <dt>{reason}</dt>
                          <dd className="text-muted">{remedy}</dd>
                        </div>
                      ))}
                  </dl>
                </section>
              ))}
            </div>
          )}
        </QueryView>
      </div>
    </details>
  );
};
