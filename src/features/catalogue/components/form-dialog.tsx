import { useState, type ReactNode } from "react";
import type { FieldValues, Path, UseFormReturn } from "react-hook-form";
import { Button } from "@/components/ui/button";
import { Dialog } from "@/components/ui/dialog";
import { LeaveGuard } from "@/components/ui/leave-guard";
import { Notice } from "@/components/ui/notice";
import { useStatusLine } from "@/components/ui/status-line";
import { saveProblem, type SaveProblem } from "../view/save-problem";

type FormDialogProps<Input extends FieldValues, Output extends FieldValues> = {
  title: string;
  form: UseFormReturn<Input, unknown, Output>;
  /** Names of the form's fields, as the server names them too. */
  fields: readonly string[];
  /** Sends what was filled in; answers what to say when it is done. */
  save: (values: Output) => Promise<string>;
  /** Asks again for what is there, also where a change was refused because someone was quicker. */
  refresh: () => Promise<unknown>;
  onClose: () => void;
  /** Nothing can be changed by this person: the fields are to be read. */
  isReadOnly?: boolean;
  remove?: { sentence: string; act: () => Promise<string> };
  children: ReactNode;
  /** Below the form: the history. */
  after?: ReactNode;
};

type Asking = "close" | "remove" | null;

/** A form in a dialog: what is wrong stands at its field, and nothing typed is lost without asking. */
export const FormDialog = <Input extends FieldValues, Output extends FieldValues>(props: FormDialogProps<Input, Output>) => {
  const { title, form, fields, save, refresh, onClose, isReadOnly = false, remove, children, after } = props;
  const status = useStatusLine();
  const [problem, setProblem] = useState<SaveProblem | null>(null);
  const [asking, setAsking] = useState<Asking>(null);
  const [isBusy, setIsBusy] = useState(false);
  const { isDirty } = form.formState;
  const act = async (work: () => Promise<string>) => {
    setIsBusy(true);
    setProblem(null);
    try {
      status.done(await work());
      form.reset(form.getValues());
      onClose();
      await refresh();
    } catch (error) {
      const refused = saveProblem(error, fields);
      refused.atFields.forEach(({ field, message }, at) => form.setError(field as Path<Input>, { message }, { shouldFocus: at === 0 }));
      setProblem(refused);
      setAsking(null);
      if (refused.isOutdated) await refresh();
    } finally {
      setIsBusy(false);
    }
  };
  const close = () => (isDirty && !isReadOnly ? setAsking("close") : onClose());
  const submit = form.handleSubmit((values) => act(() => save(values)));
  return (
    <Dialog open onClose={close} title={title}>
      <form noValidate onSubmit={(event) => void submit(event)} aria-label={title} className="flex flex-col gap-4">
        <fieldset disabled={isReadOnly} className="flex min-w-0 flex-col gap-4">
          {children}
        </fieldset>
        {problem?.sentence && (
          <Notice tone="danger" role="alert">
            {problem.sentence}
            {problem.isOutdated && " What you have changed still stands in the form, the rest is as it is now: look at it and save again."}
          </Notice>
        )}
        <div className="mt-1 flex flex-wrap items-center justify-end gap-3">
          {isReadOnly && <Button onClick={onClose}>Close</Button>}
          {!isReadOnly && asking === "close" && (
            <Question sentence="The changes are not saved." no="Go on editing" yes="Lose the changes" onNo={() => setAsking(null)} onYes={onClose} />
          )}
          {!isReadOnly && asking === "remove" && remove && (
            <Question
              sentence={remove.sentence} no="Keep it" yes="Remove" isBusy={isBusy} onNo={() => setAsking(null)}
              onYes={() => void act(remove.act)}
            />
          )}
          {!isReadOnly && asking === null && (
            <>
              {remove && (
                <Button tone="quiet" className="mr-auto text-danger" onClick={() => setAsking("remove")}>
                  Remove
                </Button>
              )}
              <Button onClick={close}>Cancel</Button>
              <Button type="submit" tone="primary" busy={isBusy}>
                Save
              </Button>
            </>
          )}
        </div>
      </form>
      {after}
      <LeaveGuard isUnsaved={isDirty && !isReadOnly}>What you have filled in is not saved yet.</LeaveGuard>
    </Dialog>
  );
};

type QuestionProps = { sentence: string; no: string; yes: string; isBusy?: boolean; onNo: () => void; onYes: () => void };

const Question = ({ sentence, no, yes, isBusy, onNo, onYes }: QuestionProps) => (
  <>
    <p className="mr-auto font-medium" role="alert">
      {sentence}
    </p>
    <Button onClick={onNo} autoFocus>
      {no}
    </Button>
    <Button tone="danger" busy={isBusy} onClick={onYes}>
      {yes}
    </Button>
  </>
);
