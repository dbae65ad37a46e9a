export type ProofFormat = "avif" | "webp" | "jpeg";

export type Proof = { format: ProofFormat; width: number; height: number; url: string };

export type PictureProps = {
  /** Every size and format there is; none while proofs are being made. */
  proofs: readonly Proof[];
  /** What is to be seen; empty when the picture repeats what stands beside it. */
  alt: string;
  /** As the HTML attribute. "100vw" when left out. */
  sizes?: string;
  /** The shape, in any unit, when no proof tells it. */
  width?: number;
  height?: number;
  loading?: "lazy" | "eager";
  fetchPriority?: "high" | "low" | "auto";
  /** Written in the empty window while there is no proof. */
  waiting?: string;
};

const types: readonly { format: ProofFormat; type: string }[] = [
  { format: "avif", type: "image/avif" },
  { format: "webp", type: "image/webp" },
  { format: "jpeg", type: "image/jpeg" },
];

function byWidth(proofs: readonly Proof[], format: ProofFormat): Proof[] {
  return proofs.filter((proof) => proof.format === format).sort((a, b) => a.width - b.width);
}

function srcSet(proofs: readonly Proof[]): string {
  return proofs.map((proof) => `${proof.url} ${proof.width}w`).join(", ");
}

/** A photograph in the sizes and formats there are, never cropped; a drawn empty window until then. */
export function Picture({
  proofs,
  alt,
  sizes = "100vw",
  width,
  height,
  loading,
  fetchPriority,
  waiting,
}: PictureProps) {
  const sets = types
    .map(({ format, type }) => ({ type, proofs: byWidth(proofs, format) }))
    .filter((set) => set.proofs.length > 0);
  const fallback = sets.at(-1);
  const largest = fallback?.proofs.at(-1);
  if (!fallback || !largest) return <EmptyWindow width={width} height={height} alt={alt} waiting={waiting} />;
  return (
    <picture>
      {sets
        .filter((set) => set !== fallback)
        .map((set) => (
          <source key={set.type} type={set.type} srcSet={srcSet(set.proofs)} sizes={sizes} />
        ))}
      <img
        src={largest.url}
        srcSet={srcSet(fallback.proofs)}
        sizes={sizes}
        width={largest.width}
        height={largest.height}
        alt={alt}
        loading={loading}
        fetchPriority={fetchPriority}
        decoding="async"
      />
    </picture>
  );
}

function EmptyWindow({
  width = 5,
  height = 4,
  alt,
  waiting,
}: Pick<PictureProps, "width" | "height" | "alt" | "waiting">) {
  const high = Math.round((height / width) * 1000);
  return (
    <span className="empty-window">
      <svg viewBox={`0 0 1000 ${high}`} aria-hidden="true" focusable="false">
        <path d={`M0 0L1000 ${high}M1000 0L0 ${high}`} vectorEffect="non-scaling-stroke" />
      </svg>
      {alt ? <span className="vh">{alt}</span> : null}
      {waiting ? <span className="pencil">{waiting}</span> : null}
    </span>
  );
}
