import { href } from "react-router";
import type { PictureProps } from "~/components/ui/picture";
import type { StudioPicture } from "~/domain/prints/studio-prints.server";

/** A picture of the studio, its proofs read through the studio's own address, so that it shows before it is public. */
export function studioPicture(picture: StudioPicture, alt = picture.alt): PictureProps {
  return {
    alt,
    width: picture.width,
    height: picture.height,
    proofs: picture.proofs.map((proof) => ({
      format: proof.format,
      width: proof.width,
      height: proof.height,
      url: href("/studio/proofs/:proofId", { proofId: proof.id }),
    })),
  };
}
