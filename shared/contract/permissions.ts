import { z } from "zod";

/** Roles a person can hold; one person may hold several. */
export const roleSchema = z.enum(["data-admin", "planner", "category-manager", "administrator"]);
export type Role = z.infer<typeof roleSchema>;

/** What a route may ask for. Everyone signed in reads. */
export const permissionSchema = z.enum([
  "read",
  "extracts:write",
  "catalogue:write",
  "models:fit",
  "models:use",
  "scenarios:write",
  "scenarios:decide",
  "people:manage",
  "settings:manage",
  "audit:read",
]);
export type Permission = z.infer<typeof permissionSchema>;

const permissionsByRole: Record<Role, readonly Permission[]> = {
  "data-admin": ["read", "extracts:write", "catalogue:write"],
  planner: ["read", "models:fit", "scenarios:write"],
  "category-manager": ["read", "models:fit", "scenarios:write", "models:use", "scenarios:decide"],
  administrator: ["read", "people:manage", "settings:manage", "audit:read"],
};

/** Every permission that the roles give together, without repeats, in the order of `permissionSchema`. */
export function permissionsOf(roles: readonly Role[]): Permission[] {
  const given = new Set(roles.flatMap((role) => permissionsByRole[role]));
  return permissionSchema.options.filter((permission) => given.has(permission));
}

/** In a person's categories it stands for every category, also those that products bring later. */
export const everyCategory = "*";

/** Whether a category is among those a person decides on. */
export function decidesOn(categories: readonly string[], categoryCode: string): boolean {
  return categories.includes(everyCategory) || categories.includes(categoryCode);
}
