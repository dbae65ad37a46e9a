import path from "node:path";
import { describe, expect, test } from "vitest";
import { readStorageSettings } from "./settings";

const environment = {
  STORAGE_PORT: "21001",
  DATA_DIR: "somewhere",
  S3_ACCESS_KEY_ID: "studio",
  S3_SECRET_ACCESS_KEY: "a secret",
  S3_REGION: "eu-west-1",
  S3_BUCKET_PRIVATE: "numberleaf-private",
  S3_BUCKET_PUBLIC: "numberleaf-public",
  STORAGE_CORS_ORIGINS: "http://127.0.0.1:3000, https://shop.example",
};

describe("settings of the storage server", () => {
  test("are read, with loopback as the default", () => {
    expect(readStorageSettings({ ...environment, HOST: "" })).toEqual({
      host: "127.0.0.1",
      port: 21001,
      folder: path.resolve("somewhere", "storage"),
      accessKeyId: "studio",
      secretAccessKey: "a secret",
      region: "eu-west-1",
      privateBucket: "numberleaf-private",
      publicBucket: "numberleaf-public",
      corsOrigins: ["http://127.0.0.1:3000", "https://shop.example"],
    });
  });

  test("it does not start in production", () => {
    expect(() => readStorageSettings({ ...environment, NUMBERLEAF_MODE: "production" })).toThrow(
      /production/,
    );
  });

  test.each([
    ["S3_SECRET_ACCESS_KEY", undefined],
    ["S3_REGION", ""],
    ["STORAGE_PORT", "many"],
    ["STORAGE_CORS_ORIGINS", "*"],
    ["STORAGE_CORS_ORIGINS", "http://127.0.0.1:3000/path"],
    ["S3_BUCKET_PUBLIC", "numberleaf-private"],
  ])("%s as %s is refused by name", (name, value) => {
    expect(() => readStorageSettings({ ...environment, [name]: value })).toThrow(name);
  });
});
