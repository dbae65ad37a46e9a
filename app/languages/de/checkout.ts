export const checkout = {};
