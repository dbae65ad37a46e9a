// PLACEHOLDER_ROUTE
import { AppError } from "~/platform/errors";

export function loader() {
  throw new AppError("not_found");
}

export default function Page() {
  return null;
}
