export const shop = {};
