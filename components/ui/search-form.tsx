"use client";

import { Button } from "./button";
import { TextField } from "./field";

type SearchFormProps = { label: string; search: string; onSearch: (search: string) => void };

/** One field in the margin; Enter searches, and what was searched can be taken away again. */
export function SearchForm({ label, search, onSearch }: SearchFormProps) {
  return (
    <form
      key={search}
      role="search"
      className="grid gap-2"
      onSubmit={(event) => {
        event.preventDefault();
        onSearch(String(new FormData(event.currentTarget).get("search") ?? ""));
      }}
    >
      <TextField type="search" name="search" label={label} defaultValue={search} maxLength={100} />
      {search && <Button small onClick={() => onSearch("")}>Show all</Button>}
    </form>
  );
}
