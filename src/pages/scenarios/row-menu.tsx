import { Link } from "react-router-dom";
import type { ScenarioItem } from "#shared/api/scenarios.ts";
import { IconButton } from "#src/components/ui/button.tsx";
import { Menu, MenuItem, MenuRule } from "#src/components/ui/menu.tsx";
import type { ScenarioActs } from "./use-scenario-acts.ts";

interface RowMenuProps {
  item: ScenarioItem;
  to: string;
  acts: ScenarioActs;
}

export function RowMenu({ item, to, acts }: RowMenuProps) {
  const { mayCreate } = acts;
  return (
    <Menu trigger={<IconButton kind="bare" small icon="more" label={`More for ${item.name}`} title="More" busy={acts.busyId === item.id} />}>
      <MenuItem asChild>
        <Link to={to}>Open</Link>
      </MenuItem>
      {mayCreate && <MenuItem onSelect={() => acts.duplicate(item)}>Duplicate</MenuItem>}
      <MenuItem onSelect={() => acts.exportJson(item)}>Export as JSON</MenuItem>
      {item.mayEdit && (
        <>
          <MenuRule />
          {item.archivedAt === null ? (
            <MenuItem onSelect={() => acts.archive(item)}>Archive</MenuItem>
          ) : (
            <>
              <MenuItem onSelect={() => acts.restore(item)}>Restore</MenuItem>
              <MenuItem danger onSelect={() => acts.askToDelete(item)}>
                Delete …
              </MenuItem>
            </>
          )}
        </>
      )}
    </Menu>
  );
}
