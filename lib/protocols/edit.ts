import { type Draft, type DraftBlock, type DraftLimit, setAt } from "@/lib/protocols/draft";
import { insertBlock, moveBlock, type Place, removeBlock, setInBlock } from "@/lib/protocols/edit-blocks";

export type Edit =
  | { do: "set"; path: string; value: unknown }
  | { do: "set in block"; id: string; path: string; value: unknown }
  | { do: "insert"; place: Place; block: DraftBlock }
  | { do: "move"; id: string; direction: "up" | "down" }
  | { do: "remove"; id: string }
  | { do: "add limit"; limit: DraftLimit }
  | { do: "set in limit"; id: string; path: string; value: unknown }
  | { do: "replace limit"; limit: DraftLimit }
  | { do: "remove limit"; id: string };

export type EditorState = {
  draft: Draft;
  /** What undo goes back to, newest last. */
  past: readonly Draft[];
  /** The field last typed in: its keystrokes are one step of undo. */
  typing?: string;
};

const MOST_UNDO = 100;

/** The editor's state after an edit or an undo. An edit that changes nothing leaves the state as it is. */
export function editDraft(state: EditorState, edit: Edit | { do: "undo" }): EditorState {
  if (edit.do === "undo") {
    const draft = state.past.at(-1);
    return draft ? { draft, past: state.past.slice(0, -1) } : state;
  }
  const draft = changed(state.draft, edit);
  if (draft === state.draft) return state;
  const typing = "path" in edit ? `${"id" in edit ? edit.id : ""} ${edit.path}` : undefined;
  if (typing !== undefined && typing === state.typing) return { ...state, draft };
  return { draft, past: [...state.past, state.draft].slice(-MOST_UNDO), typing };
}

function changed(draft: Draft, edit: Edit): Draft {
  switch (edit.do) {
    case "set":
      return setAt(draft, edit.path, edit.value);
    case "set in block":
      return setInBlock(draft, edit.id, edit.path, edit.value);
    case "insert":
      return insertBlock(draft, edit.place, edit.block);
    case "move":
      return moveBlock(draft, edit.id, edit.direction);
    case "remove":
      return removeBlock(draft, edit.id);
    case "add limit":
      return { ...draft, limits: [...draft.limits, edit.limit] };
    case "set in limit":
      return { ...draft, limits: draft.limits.map((limit) => (limit.id === edit.id ? setAt(limit, edit.path, edit.value) : limit)) };
    case "replace limit":
      return { ...draft, limits: draft.limits.map((limit) => (limit.id === edit.limit.id ? edit.limit : limit)) };
    case "remove limit":
      return { ...draft, limits: draft.limits.filter(({ id }) => id !== edit.id) };
  }
}
