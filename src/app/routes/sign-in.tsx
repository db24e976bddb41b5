import { useNavigate, useSearchParams } from "react-router-dom";
import { LogoMark } from "@/components/ui/logo";
import { Sheet } from "@/components/ui/sheet";
import { SignInForm } from "@/features/accounts/components/sign-in-form";
import { safeReturn } from "@/lib/paths";
import { SignInScene } from "./sign-in-scene";

export const SignInRoute = () => {
  const navigate = useNavigate();
  const [search] = useSearchParams();
  return (
    <main className="relative flex min-h-dvh flex-col items-center justify-center overflow-hidden p-5 pb-40">
      <title>Sign in · Shelftide</title>
      <div className="z-10 w-full max-w-[22.5rem]">
        <div className="mb-7 flex items-center justify-center gap-3">
          <LogoMark className="w-9 text-accent" />
          <h1 className="text-2xl font-semibold tracking-[-0.02em]">Shelftide</h1>
        </div>
        <Sheet className="p-6 sm:p-7">
          <SignInForm onSignedIn={() => void navigate(safeReturn(search.get("returnTo")), { replace: true })} />
        </Sheet>
        <p className="mt-5 text-center text-muted">Every number is a sum of parts you can see.</p>
      </div>
      <SignInScene />
    </main>
  );
};
