import { zodResolver } from "@hookform/resolvers/zod";
import { useQuery } from "@tanstack/react-query";
import { useForm } from "react-hook-form";
import { chainSchema, type Chain } from "@shared/contract/chain";
import { Button } from "@/components/ui/button";
import { LeaveGuard } from "@/components/ui/leave-guard";
import { Notice } from "@/components/ui/notice";
import { QueryView } from "@/components/ui/query-view";
import { useStatusLine } from "@/components/ui/status-line";
import { chainQuery } from "@/lib/chain";
import { useChangeChain } from "../api/change-chain";
import { settingsProblem } from "../view/settings-problem";
import { ChainGroup, ExtractsGroup, ScreensGroup, WeeksGroup } from "./chain-settings-groups";

/** What holds for the whole chain, to be changed by its administrators. */
export const ChainSettings = () => {
  const query = useQuery(chainQuery());
  return (
    <QueryView query={query} loading="Reading the settings" failure="The settings could not be read">
      {(chain) => <ChainForm saved={chain} />}
    </QueryView>
  );
};

const ChainForm = ({ saved }: { saved: Chain }) => {
  const change = useChangeChain();
  const status = useStatusLine();
  const form = useForm<Chain>({ resolver: zodResolver(chainSchema), values: saved, resetOptions: { keepDirtyValues: true } });
  const { isDirty, dirtyFields } = form.formState;
  const problem = change.isError ? settingsProblem(change.error, Object.keys(saved)) : null;
  const submit = form.handleSubmit((chain) => {
    // Only what was changed is sent: another administrator's change to something else stays.
    const changed = Object.fromEntries(Object.entries(chain).filter(([name]) => dirtyFields[name as keyof Chain]));
    change.mutate(changed, {
      onSuccess: (kept) => {
        form.reset(kept, { keepDirtyValues: false });
        status.done("The settings are saved.");
      },
      onError: (error) => {
        const { atFields } = settingsProblem(error, Object.keys(saved));
        atFields.forEach(({ field, message }, at) => form.setError(field, { message }, { shouldFocus: at === 0 }));
      },
    });
  });
  const discard = () => {
    form.reset(saved, { keepDirtyValues: false });
    change.reset();
  };
  return (
    <form noValidate onSubmit={submit} aria-label="Chain settings" className="flex flex-col gap-4">
      <ChainGroup form={form} saved={saved} />
      <WeeksGroup form={form} saved={saved} />
      <ScreensGroup control={form.control} />
      <ExtractsGroup control={form.control} />
      {problem?.sentence && (
        <Notice tone="danger" role="alert">
          {problem.sentence}
        </Notice>
      )}
      <div className="sticky bottom-0 -mx-4 flex flex-wrap items-center justify-end gap-3 border-t border-hairline bg-paper px-4 py-3">
        <p className="mr-auto text-muted max-sm:sr-only" aria-live="polite">
          {isDirty ? "There are changes that are not saved." : "Everything is saved."}
        </p>
        <Button disabled={!isDirty} onClick={discard}>
          Discard
        </Button>
        <Button type="submit" tone="primary" busy={change.isPending} disabled={!isDirty && !change.isPending}>
          Save settings
        </Button>
      </div>
      <LeaveGuard isUnsaved={isDirty}>The changes to the chain’s settings are not saved yet.</LeaveGuard>
    </form>
  );
};
