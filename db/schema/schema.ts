/** Every table and enum, as Drizzle and drizzle-kit want them: one module. */
export * from "./editions";
export * from "./orders";
export * from "./people";
export * from "./pictures";
export * from "./studio";
export * from "./system";
