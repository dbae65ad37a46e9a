import { Form, href, Link } from "react-router";
import { TextArea } from "~/components/form/field";
import { formState } from "~/components/form/form-state";
import { Select } from "~/components/form/select";
import { Block } from "~/components/studio/bench";
import { cropAnswers, PrintCrop } from "~/components/studio/print-crop";
import { studioPicture } from "~/components/studio/studio-picture";
import { Notice } from "~/components/ui/notice";
import { Press, PressLink } from "~/components/ui/press";
import type { PrintPicture } from "~/domain/prints/studio-prints.server";
import type { FormProblem } from "~/platform/form-fields";

export type PrintPicturesProps = {
  printId: string;
  pictures: readonly PrintPicture[];
  problem: FormProblem | undefined;
  /** Why pictures and crop stay; null while they may change. */
  fixed: string | null;
  mayChange: boolean;
};

/** The pictures of a print: description, crop, scan version; and, in a portfolio, their order. */
export function PrintPictures({ printId, pictures, problem, fixed, mayChange }: PrintPicturesProps) {
  return (
    <Block
      title={pictures.length > 1 ? "Pictures" : "Picture"}
      aside={
        mayChange && fixed === null ? (
          <Link to={`${href("/studio/prints/new")}?to=${printId}`}>Add a picture</Link>
        ) : null
      }
    >
      {fixed === null ? null : (
        <Notice kind="note" level={3} title="Pictures and crop stay as they are">
          <p>{fixed}</p>
        </Notice>
      )}
      {pictures.map((picture, at) => (
        <OnePicture
          key={`${picture.id} ${picture.scan.id} ${Object.values(picture.crop).join()}`}
          picture={picture}
          at={at}
          all={pictures.length}
          problem={problem?.answers.pictureId === picture.id ? problem : undefined}
          fixed={fixed !== null}
          mayChange={mayChange}
        />
      ))}
    </Block>
  );
}

const PROOF_WORDS: Record<PrintPicture["proofState"], string> = {
  waiting: "Its proofs wait their turn.",
  working: "Its proofs are being made.",
  ready: "Its proofs are ready.",
  failed: "Its proofs could not be made.",
};

type OnePictureProps = {
  picture: PrintPicture;
  at: number;
  all: number;
  problem: FormProblem | undefined;
  fixed: boolean;
  mayChange: boolean;
};

function OnePicture({ picture, at, all, problem, fixed, mayChange }: OnePictureProps) {
  const prefix = picture.id;
  const form = formState(problem, {
    ...cropAnswers(picture.crop),
    scanId: picture.scan.id,
    description: picture.description,
  });
  const newest = picture.versions[0];
  return (
    <div className="print-picture">
      <div className="print-picture-head">
        <h3>
          {all > 1 ? `${at + 1}. ` : ""}
          <Link
            to={href("/studio/rolls/:rollId/frames/:frameId", {
              rollId: picture.rollId,
              frameId: picture.frameId,
            })}
          >
            {picture.where.charAt(0).toUpperCase() + picture.where.slice(1)}
          </Link>
        </h3>
        <p className="quiet">
          Rests on scan version {picture.scan.version}. {PROOF_WORDS[picture.proofState]}
          {picture.proofFailure ? ` ${picture.proofFailure}` : ""}
          {newest && newest.id !== picture.scan.id ? ` Version ${newest.version} is the newest.` : ""}
        </p>
      </div>
      <Form method="post" preventScrollReset className="bench-form">
        <input type="hidden" name="intent" value="picture" />
        <input type="hidden" name="pictureId" value={picture.id} />
        <PrintCrop
          form={form}
          prefix={prefix}
          picture={studioPicture(picture.whole)}
          scan={picture.scan}
          fixed={fixed || !mayChange}
        />
        {picture.versions.length > 1 && !fixed ? (
          <Select
            id={`${prefix}-scanId`}
            label="Scan version it rests on"
            {...form.field("scanId")}
            options={picture.versions.map((version) => ({
              value: version.id,
              label: `Version ${version.version}, ${version.width} × ${version.height} px`,
            }))}
          />
        ) : null}
        <TextArea
          id={`${prefix}-description`}
          label="Description for those who cannot see it"
          hint="What is to be seen, not that it is a photograph. Needed before the print is published."
          rows={2}
          {...form.field("description")}
          readOnly={!mayChange}
        />
        {mayChange ? (
          <div className="acts">
            <Press variant="outlined">
              Keep this picture's {fixed ? "description" : "crop and description"}
            </Press>
          </div>
        ) : null}
      </Form>
      {mayChange && !fixed && all > 1 ? (
        <Form method="post" preventScrollReset className="acts picture-acts">
          <input type="hidden" name="pictureId" value={picture.id} />
          {at > 0 ? (
            <PictureAct intent="move-picture" to="earlier">
              Move earlier
            </PictureAct>
          ) : null}
          {at < all - 1 ? (
            <PictureAct intent="move-picture" to="later">
              Move later
            </PictureAct>
          ) : null}
          <button type="submit" name="intent" value="remove-picture" className="plain">
            Take it out of the portfolio
          </button>
        </Form>
      ) : null}
    </div>
  );
}

/** One submit button carries one name: the direction goes with the intent. */
function PictureAct({ intent, to, children }: { intent: string; to: string; children: string }) {
  return (
    <button type="submit" name="intent" value={`${intent}:${to}`} className="plain">
      {children}
    </button>
  );
}

export type PrintStandingProps = {
  state: "draft" | "published" | "withdrawn";
  /** What keeps it from being published. */
  missing: readonly string[];
  slug: string;
  mayDelete: boolean;
};

/** What can be done with the print as a whole, each by its own press. */
export function PrintStanding({ state, missing, slug, mayDelete }: PrintStandingProps) {
  return (
    <Form method="post" className="acts">
      {state === "published" ? (
        <>
          <PressLink small to={href("/:lang?/prints/:slug", { slug })}>
            See it in the shop
          </PressLink>
          <Press variant="outlined" small name="intent" value="withdraw">
            Withdraw it from the shop
          </Press>
        </>
      ) : (
        <Press small name="intent" value="publish">
          {state === "withdrawn" ? "Publish it again" : "Publish it in the shop"}
        </Press>
      )}
      {mayDelete ? (
        <Press variant="word" small name="intent" value="delete">
          Delete this draft
        </Press>
      ) : null}
      {state !== "published" && missing.length > 0 ? (
        <span className="quiet">
          {missing.length === 1 ? "One thing is" : `${missing.length} things are`} missing.
        </span>
      ) : null}
    </Form>
  );
}
