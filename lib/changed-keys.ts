/** What a change of the laboratory makes old of what a browser has: beginnings of query keys, by the name of the change. */
export function keysChangedBy(name: string): (readonly string[])[] {
  const [what, id] = name.split(":", 2);
  switch (what) {
    case "campaign":
      return [["campaigns", "one", id], ["campaigns", "events", id], ["campaigns", "notes", id], ["campaigns", "fit-runs", id], ["campaigns", "list"], ["campaigns", "overview"], ["rigs"], ["today"]];
    case "alarms":
      return [["alarms"], ["campaigns", "overview"], ["me"], ["today"]];
    case "tasks":
      return [["tasks"], ["campaigns", "overview"], ["today"]];
    case "rigs":
      return [["rigs"], ["sensors"], ["campaigns", "check"], ["today"]];
    case "sensors":
      return [["sensors"], ["campaigns", "choices"]];
    case "liquids":
      return [["liquids"], ["campaigns", "choices"]];
    case "protocol":
      return [["protocols"], ["campaigns", "choices"]];
    case "imports":
      return [["imports"], ["campaigns", "list"], ["campaigns", "overview"]];
    default:
      return [];
  }
}
