/** Changes when the same sweep would be fitted to another value; kept with each fit run. */
export const FIT_CODE_VERSION = "2";
