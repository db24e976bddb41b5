import { describe, expect, it } from "vitest";
import { permissionSchema, permissionsOf, roleSchema } from "@shared/contract/permissions";

describe("the permissions of roles", () => {
  it("let everyone read, and no one without a role", () => {
    for (const role of roleSchema.options) expect(permissionsOf([role])).toContain("read");
    expect(permissionsOf([])).toEqual([]);
  });

  it("are those of all of a person's roles together, each once", () => {
    expect(permissionsOf(["planner", "category-manager", "planner"])).toEqual(permissionsOf(["category-manager"]));
    expect(permissionsOf(["data-admin", "administrator"])).toEqual([
      "read",
      "extracts:write",
      "catalogue:write",
      "people:manage",
      "settings:manage",
      "audit:read",
    ]);
  });

  it("give each permission to some role", () => {
    expect(permissionsOf(roleSchema.options)).toEqual(permissionSchema.options);
  });

  it("keep extracts from planners, and plans and fits from data admins and administrators", () => {
    for (const role of ["planner", "category-manager", "administrator"] as const) {
      expect(permissionsOf([role])).not.toContain("extracts:write");
    }
    for (const role of ["data-admin", "administrator"] as const) {
      expect(permissionsOf([role])).not.toContain("scenarios:write");
      expect(permissionsOf([role])).not.toContain("models:fit");
    }
  });
});
