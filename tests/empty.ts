// Stands in for 'server-only' in tests, which is a marker without content.
export {};
