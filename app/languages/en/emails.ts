export const emails = {};
