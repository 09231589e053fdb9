/** A line for the person who typed the command. */
export function say(text) {
  console.log(text);
}

/** What the person can act on: shown as a sentence, without a stack. */
export class Stop extends Error {}
