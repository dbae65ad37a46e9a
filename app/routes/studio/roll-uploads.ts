import { signedInContext } from "~/context";
import { beginUploads } from "~/domain/rolls/begin-uploads.server";
import { finishUpload } from "~/domain/rolls/finish-upload.server";
import { signUpload } from "~/domain/rolls/sign-upload.server";
import { uploadMessage } from "~/domain/rolls/upload-messages";
import type { UploadAnswer } from "~/domain/rolls/uploading";
import { AppError } from "~/platform/errors";
import { isUuid } from "~/platform/uuid";
import type { Route } from "./+types/roll-uploads";

/** Far more than two hundred file names take. */
const MOST_BYTES = 256 * 1024;

/** There is nothing to see here; the page that sends scans posts to it. */
export function loader(): never {
  throw new AppError("not_found");
}

export async function action({ request, params, context }: Route.ActionArgs) {
  const actor = context.get(signedInContext);
  const { rollId } = params;
  if (!isUuid(rollId)) throw new AppError("not_found");
  const message = uploadMessage.safeParse(await readJson(request));
  if (!message.success) throw new AppError("bad_request", "the message is not one of an upload");
  switch (message.data.act) {
    case "begin":
      return Response.json({
        scans: await beginUploads(actor, { rollId, ...message.data }),
      } satisfies UploadAnswer["begin"]);
    case "sign":
      return Response.json(
        (await signUpload(actor, { rollId, ...message.data })) satisfies UploadAnswer["sign"],
      );
    case "finished":
      return Response.json(
        (await finishUpload(actor, { rollId, ...message.data })) satisfies UploadAnswer["finished"],
      );
  }
}

async function readJson(request: Request): Promise<unknown> {
  if (Number(request.headers.get("content-length") ?? 0) > MOST_BYTES) throw new AppError("bad_request");
  try {
    return await request.json();
  } catch (cause) {
    throw new AppError("bad_request", "the body is not JSON", { cause });
  }
}
