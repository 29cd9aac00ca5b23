import type { Definition, Sweep } from "./schema";
import type { RigAbilities, SweepParams, Track } from "./types";

/** Whether a sweep needs to know the resonance beforehand. */
export function followsTrack({ centre, span, dwell }: Sweep): boolean {
  return centre === "track" || "halfWidths" in span || "ringDowns" in dwell;
}

/**
 * A protocol's sweep in Hz and seconds for one rig.
 *
 *   half-width = f0/(2Q)    ring-down τ = Q/(π f0)
 *
 * The span is the total, centred; its ends are clamped to the rig's range and its start also to ≥ f0/4, the points stay
 * (at most the rig's). f0 is the track's, or the centre where the sweep follows none.
 *
 * @param track f0 in Hz and Q of the last good fit; needed where `followsTrack(sweep)`.
 * @returns Undefined where nothing of the sweep lies within the rig's range.
 * @throws RangeError if the sweep follows a track and there is none, or f0 or Q is not a positive finite number.
 */
export function resolveSweep(
  sweep: Sweep,
  track: Track | undefined,
  abilities: RigAbilities,
): SweepParams | undefined {
  if (followsTrack(sweep) && !track) throw new RangeError("this sweep follows the last good fit, and there is none");
  if (track) checkTrack(track);
  const centreHz = sweep.centre === "track" ? known(track).f0Hz : sweep.centre;
  const spanHz = "hz" in sweep.span ? sweep.span.hz : (sweep.span.halfWidths * known(track).f0Hz) / (2 * known(track).q);
  const range = clamp(centreHz - spanHz / 2, centreHz + spanHz / 2, (track?.f0Hz ?? centreHz) / 4, abilities);
  if (!range) return undefined;
  return {
    ...range,
    points: Math.min(sweep.points, abilities.maxPoints),
    dwellS: "s" in sweep.dwell ? sweep.dwell.s : ringDownsS(sweep.dwell.ringDowns, known(track)),
    driveV: Math.min(sweep.driveV, abilities.maxDriveV),
  };
}

/**
 * The wide sweep of a `find` step: the protocol's `search`, else around what is known of the sensor.
 *
 * Around a resonance known in the same medium, and around the nominal value in air, it reaches ±10 % or 10 half-widths,
 * whichever is more (at most ±70 %); in a liquid, which loads the resonator, from 0.4 to 1.05 of the nominal value. Points lie at most half a half-width apart as far
 * as the rig allows, in a liquid with Q taken as a twentieth of the nominal one. (Our choices, no source.)
 */
export function findSweep(
  sweep: Sweep,
  { search, medium, nominal, elsewhere, abilities }: {
    search: Definition["search"];
    medium: string;
    nominal: Track;
    /** A resonance in the same medium, at this set-point or another. */
    elsewhere: Track | undefined;
    abilities: RigAbilities;
  },
): SweepParams | undefined {
  const around = elsewhere ?? (medium === "air" ? nominal : { f0Hz: nominal.f0Hz, q: Math.max(nominal.q / 20, 2) });
  checkTrack(around);
  const reach = Math.min(0.7, Math.max(0.1, 10 / (2 * around.q)));
  const wide = !elsewhere && medium !== "air" ? { from: 0.4, to: 1.05 } : { from: 1 - reach, to: 1 + reach };
  const fromHz = search?.fromHz ?? around.f0Hz * wide.from;
  const toHz = search?.toHz ?? around.f0Hz * wide.to;
  const range = clamp(fromHz, toHz, 0, abilities);
  if (!range) return undefined;
  const halfWidthHz = around.f0Hz / (2 * around.q);
  const points = search?.points ?? Math.min(4001, Math.max(401, Math.ceil((toHz - fromHz) / (halfWidthHz / 2)) + 1));
  return {
    ...range,
    points: Math.min(points, abilities.maxPoints),
    dwellS: "s" in sweep.dwell ? sweep.dwell.s : ringDownsS(sweep.dwell.ringDowns, around),
    driveV: Math.min(sweep.driveV, abilities.maxDriveV),
  };
}

function ringDownsS(n: number, { f0Hz, q }: Track): number {
  return (n * q) / (Math.PI * f0Hz);
}

function clamp(fromHz: number, toHz: number, leastHz: number, { minHz, maxHz }: RigAbilities) {
  const startHz = Math.max(fromHz, minHz, leastHz);
  const stopHz = Math.min(toHz, maxHz);
  return startHz < stopHz ? { startHz, stopHz } : undefined;
}

function checkTrack({ f0Hz, q }: Track): void {
  if (!(f0Hz > 0 && q > 0 && Number.isFinite(f0Hz) && Number.isFinite(q)))
    throw new RangeError(`f0 and Q must be positive, got ${f0Hz} Hz and ${q}`);
}

function known(track: Track | undefined): Track {
  if (!track) throw new RangeError("this sweep follows the last good fit, and there is none");
  return track;
}
