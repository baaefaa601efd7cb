/** Version of the numerical core; raised whenever a figure could change. Part of every run's hash. */
export const ENGINE_VERSION = '1.0.0'
