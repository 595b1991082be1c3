export const ENGINE_VERSION = "2.0.0";
