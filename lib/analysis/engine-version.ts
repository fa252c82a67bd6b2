/** Version of the computation: goes up whenever the same recordings may give other numbers. */
export const ENGINE_VERSION = "1.1.0";
