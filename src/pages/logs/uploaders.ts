import { rolesThatMay } from "#shared/api/permissions.ts";
import { listed, withArticle } from "#src/lib/format.ts";

/** "an engineer, a reviewer or an administrator" */
export const uploaders = (): string => listed(rolesThatMay("edit-logs").map(withArticle), "or");
