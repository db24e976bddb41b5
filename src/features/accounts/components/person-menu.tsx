import { Bell, KeyRound, LogOut, Settings2 } from "lucide-react";
import type { Session } from "@shared/contract/accounts";
import { Avatar } from "@/components/ui/avatar";
import { Menu, MenuChoices, MenuItem, MenuLine, MenuNote } from "@/components/ui/menu";
import { useStatusLine } from "@/components/ui/status-line";
import { initialsOf, roleName } from "@/lib/session";
import { chooseTheme, useThemeChoice } from "@/lib/theme";
import { useSignOut } from "../api/sign-out";

const themes = [
  { value: "system", label: "As the system" },
  { value: "light", label: "Light" },
  { value: "dark", label: "Dark" },
] as const;

type PersonMenuProps = {
  person: Session["person"];
  onChangePassword: () => void;
  onNotices: () => void;
  /** Absent for who may not change the chain's settings. */
  onSettings?: () => void;
};

/** Who is signed in, as what, in which theme; and the way out. */
export const PersonMenu = ({ person, onChangePassword, onNotices, onSettings }: PersonMenuProps) => {
  const theme = useThemeChoice();
  const signOut = useSignOut();
  const status = useStatusLine();
  return (
    <Menu
      trigger={
        <button
          type="button"
          aria-label={`${initialsOf(person.name)}: account of ${person.name}`}
          className="rounded-full"
        >
          <Avatar initials={initialsOf(person.name)} />
        </button>
      }
    >
      <MenuNote>
        <span className="block font-semibold">{person.name}</span>
        <span className="block text-sm text-muted">{person.email}</span>
        <span className="mt-1 block text-sm text-muted">{person.roles.map(roleName).join(", ")}</span>
      </MenuNote>
      <MenuLine />
      <MenuChoices label="Theme" choices={themes} value={theme} onChange={chooseTheme} />
      <MenuLine />
      <MenuItem onSelect={onNotices}>
        <Bell aria-hidden="true" /> Notices
      </MenuItem>
      {onSettings && (
        <MenuItem onSelect={onSettings}>
          <Settings2 aria-hidden="true" /> Chain settings
        </MenuItem>
      )}
      <MenuItem onSelect={onChangePassword}>
        <KeyRound aria-hidden="true" /> Change password
      </MenuItem>
      <MenuItem
        onSelect={() =>
          signOut.mutate(undefined, {
            onError: () => status.failed("You are still signed in: the server did not answer."),
          })
        }
      >
        <LogOut aria-hidden="true" /> Sign out
      </MenuItem>
    </Menu>
  );
};
