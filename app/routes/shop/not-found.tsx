import { AppError } from "~/platform/errors";

/** Every address below the shop that nothing else answers to. */
export function loader(): never {
  throw new AppError("not_found");
}

export default function NotFound() {
  return null;
}
