import { useNavigate } from "react-router-dom";
import { PageHeader } from "@/components/ui/page-header";
import { Sheet } from "@/components/ui/sheet";
import { useStatusLine } from "@/components/ui/status-line";
import { ChangePasswordForm } from "@/features/accounts/components/change-password-form";
import { paths } from "@/lib/paths";
import { useSession } from "@/lib/session";

export const PasswordRoute = () => {
  const session = useSession();
  const navigate = useNavigate();
  const status = useStatusLine();
  const facts = session?.person.mustChangePassword
    ? ["Yours was made for you: choose one only you know, then go on."]
    : [];
  return (
    <div className="mx-auto max-w-md">
      <PageHeader title="Change password" facts={facts} />
      <Sheet>
        <ChangePasswordForm
          onChanged={() => {
            status.done("Your password is changed.");
            void navigate(paths.home.href());
          }}
        />
      </Sheet>
    </div>
  );
};
