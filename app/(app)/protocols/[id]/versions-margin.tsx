import Link from "next/link";
import { formatDay } from "@/lib/format-time";
import type { ProtocolAnswer } from "@/lib/protocols/schema";

type VersionsMarginProps = { protocol: ProtocolAnswer; shownId: string | null; zone: string; now: string; mayEdit: boolean };

/** Versions, newest first, and the draft of the next. */
export function VersionsMargin({ protocol: { id, versions, draft }, shownId, zone, now, mayEdit }: VersionsMarginProps) {
  const next = (versions.at(0)?.version ?? 0) + 1;
  return (
    <nav className="choices" aria-label="Versions">
      {draft && mayEdit && <Link href={`/protocols/${id}/edit`}>Draft of version {next}</Link>}
      {versions.map(({ id: versionId, version, savedAt, campaigns }, index) => (
        <Link key={versionId} href={index === 0 ? `/protocols/${id}` : `/protocols/${id}?version=${version}`} aria-current={versionId === shownId ? "page" : undefined} scroll={false}>
          Version {version}
          <em>{campaigns > 0 ? `${campaigns}\u00a0×` : formatDay(savedAt, zone, now)}</em>
        </Link>
      ))}
    </nav>
  );
}
