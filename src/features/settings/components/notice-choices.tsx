import { useQuery } from "@tanstack/react-query";
import type { NoticeChoices as Choices } from "@shared/contract/notices";
import type { Role } from "@shared/contract/permissions";
import { Checkbox } from "@/components/ui/checkbox";
import { QueryView } from "@/components/ui/query-view";
import { Sheet } from "@/components/ui/sheet";
import { useStatusLine } from "@/components/ui/status-line";
import { noticeChoicesQuery, useChooseNotices } from "../api/notice-choices";
import { noticesFor } from "../view/notice-words";

type NoticeChoicesProps = { email: string; roles: readonly Role[] };

/** Which e-mails a person gets: each tick is kept at once. */
export const NoticeChoices = ({ email, roles }: NoticeChoicesProps) => {
  const query = useQuery(noticeChoicesQuery());
  return (
    <QueryView query={query} loading="Reading your choices" failure="Your choices could not be read">
      {(choices) => <ChoiceList choices={choices} email={email} roles={roles} />}
    </QueryView>
  );
};

const ChoiceList = ({ choices, email, roles }: NoticeChoicesProps & { choices: Choices }) => {
  const choose = useChooseNotices();
  const status = useStatusLine();
  const keep = (next: Choices) =>
    choose.mutate(next, {
      onSuccess: () => status.done("Your choice is kept."),
      onError: () => status.failed("Your choice was not kept: the server did not take it. Try again."),
    });
  return (
    <Sheet>
      <fieldset className="flex flex-col gap-5">
        <legend className="float-left mb-1 text-base font-semibold">Send me an e-mail when</legend>
        <p className="-mt-4 text-muted">
          To <span className="text-ink">{email}</span>. Each choice is kept as you make it.
        </p>
        {noticesFor(roles).map(({ notice, label, hint }) => (
          <Checkbox
            key={notice}
            label={<span className="font-medium">{label}</span>}
            hint={hint}
            checked={choices[notice]}
            onChange={(event) => keep({ ...choices, [notice]: event.target.checked })}
          />
        ))}
      </fieldset>
    </Sheet>
  );
};
