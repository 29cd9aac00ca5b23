import recorded from "./answer-examples.json";

/**
 * Answers by call and media type, recorded from the calls themselves in the laboratory of the tests and shortened: lists to two
 * entries, numbers in a row to four. DEVELOPERS.md says how they are recorded anew; a test holds each against the document.
 */
export const ANSWER_EXAMPLES: Readonly<Record<string, Readonly<Record<string, unknown>>>> = recorded;
