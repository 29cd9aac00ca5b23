/** A fast rig has come to the time at which it is to stop. The step in hand is given back: the next agent goes on where the stored readings end. */
export class CaughtUp extends Error {
  constructor() {
    super("the rig's clock has come to its end");
  }
}
