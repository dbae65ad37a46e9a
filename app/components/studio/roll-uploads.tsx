import { useEffect, useState, useSyncExternalStore } from "react";
import { href, useBeforeUnload, useBlocker, useRevalidator } from "react-router";
import { FileDrop } from "~/components/form/file-drop";
import { Sending, type SendingState, type SentFile } from "~/components/studio/roll-sending";
import { WholeBar } from "~/components/studio/standing";
import { Notice } from "~/components/ui/notice";
import { Press } from "~/components/ui/press";
import { byteWords } from "~/domain/rolls/scan-words";

const NOTHING: SendingState = { files: [], unannounced: null, speed: null };

/** What this page sends, and how far it has come. */
export type RollUploads = { sending: Sending | null; state: SendingState };

/** The sending of scans of a roll, for as long as the page is open. Null until the page runs in the browser. */
export function useRollUploads(rollId: string): RollUploads {
  const revalidator = useRevalidator();
  const [sending, setSending] = useState<Sending | null>(null);
  const { revalidate } = revalidator;
  useEffect(() => {
    const made = new Sending(href("/studio/rolls/:rollId/uploads", { rollId }), () => void revalidate());
    setSending(made);
    return () => void made.stop();
  }, [rollId, revalidate]);
  const state = useSyncExternalStore(
    sending?.subscribe ?? noSubscription,
    sending?.snapshot ?? nothingSent,
    nothingSent,
  );
  useBeforeUnload((event) => {
    if (sending?.busy) event.preventDefault();
  });
  return { sending, state };
}

const noSubscription = () => () => undefined;
const nothingSent = () => NOTHING;

/** Asks the server again and again how things stand, while the worker is at something. */
export function useLookAgain(pending: boolean): void {
  const { revalidate, state } = useRevalidator();
  useEffect(() => {
    if (!pending || state !== "idle") return;
    const timer = setTimeout(() => {
      if (document.visibilityState === "visible") void revalidate();
    }, 1_500);
    const seen = () => document.visibilityState === "visible" && void revalidate();
    document.addEventListener("visibilitychange", seen);
    return () => {
      clearTimeout(timer);
      document.removeEventListener("visibilitychange", seen);
    };
  }, [pending, state, revalidate]);
}

export type RollUploadsPanelProps = {
  uploads: RollUploads;
  label: string;
  hint: string;
  /** Of which frame the one file is another version. */
  frameId?: string;
};

/** Where scans are chosen or dropped, and how far they have come. */
export function RollUploadsPanel({
  uploads: { sending, state },
  label,
  hint,
  frameId,
}: RollUploadsPanelProps) {
  const [batch, setBatch] = useState(0);
  const shown = state.files.filter((file) => file.state !== "arrived");
  const failed = state.files.filter((file) => file.state === "failed");
  return (
    <div className="sending">
      <noscript>
        <Notice kind="note" title="Sending scans needs script">
          <p>Everything else on this page works without. Files go from the browser straight to storage.</p>
        </Notice>
      </noscript>
      <FileDrop
        // The browser says nothing when the same files are chosen twice in one field.
        key={batch}
        name="scans"
        label={label}
        hint={hint}
        multiple={frameId === undefined}
        accept="image/tiff,image/jpeg,image/png,.tif,.tiff,.jpg,.jpeg,.png"
        disabled={sending === null}
        onFiles={(files) => {
          if (files.length > 0) void sending?.add(frameId === undefined ? files : files.slice(0, 1), frameId);
          setBatch(batch + 1);
        }}
      />
      {state.unannounced === null ? null : (
        <Notice
          kind="attention"
          role="alert"
          title={
            state.unannounced.count === 1
              ? "A file was not sent"
              : `${state.unannounced.count} files were not sent`
          }
        >
          <p>{state.unannounced.problem}</p>
          <Press type="button" small onClick={() => void sending?.retry()}>
            Try again
          </Press>
        </Notice>
      )}
      {shown.length > 0 ? <Whole sending={sending} state={state} /> : null}
      {failed.length > 0 ? <Failed sending={sending} files={failed} /> : null}
      <LeaveQuestion busy={sending?.busy ?? false} />
    </div>
  );
}

function Whole({ sending, state }: { sending: Sending | null; state: SendingState }) {
  const { files, speed } = state;
  const total = files.reduce((sum, file) => sum + file.size, 0);
  const sent = files.reduce((sum, file) => sum + file.sent, 0);
  const percent = total === 0 ? 0 : Math.floor((100 * sent) / total);
  const inHand = files.filter((file) => file.state === "arrived").length;
  const moving = files.filter((file) => file.state === "sending").length;
  const left = speed === null || !sending?.busy ? "" : `, ${timeLeft((total - sent) / speed)}`;
  return (
    <WholeBar
      title={`${inHand} of ${files.length} ${files.length === 1 ? "scan is" : "scans are"} in, ${moving === 0 ? "none is arriving" : `${moving} ${moving === 1 ? "is" : "are"} arriving`}.`}
      words={`${byteWords(sent)} of ${byteWords(total)}${left}. Keep this page open meanwhile.`}
      progress={{ value: percent, label: "Whole transfer", text: `${percent} %` }}
      acts={
        <Press type="button" variant="outlined" small onClick={() => void sending?.stop()}>
          Stop
        </Press>
      }
    />
  );
}

function timeLeft(seconds: number): string {
  if (seconds < 60) return "less than a minute left";
  const minutes = Math.round(seconds / 60);
  return minutes === 1 ? "about a minute left" : `about ${minutes} minutes left`;
}

function Failed({ sending, files }: { sending: Sending | null; files: readonly SentFile[] }) {
  const first = files[0];
  return (
    <Notice
      kind="attention"
      role="alert"
      title={files.length === 1 ? `“${first?.name}” did not arrive` : `${files.length} files did not arrive`}
    >
      <p>{first?.problem}</p>
      <Press type="button" small onClick={() => void sending?.retry()}>
        {files.length === 1 ? "Send it again" : "Send them again"}
      </Press>
    </Notice>
  );
}

/** Leaving the page within the studio would stop what is on its way, so it is asked first. */
function LeaveQuestion({ busy }: { busy: boolean }) {
  const blocker = useBlocker(
    ({ currentLocation, nextLocation }) => busy && currentLocation.pathname !== nextLocation.pathname,
  );
  if (blocker.state !== "blocked") return null;
  return (
    <Notice kind="attention" role="alert" title="Scans are still arriving">
      <p>Leaving this page stops them. Those that are in stay; the others can be chosen again.</p>
      <p className="acts">
        <Press type="button" small onClick={() => blocker.reset()}>
          Stay here
        </Press>
        <Press type="button" small variant="outlined" onClick={() => blocker.proceed()}>
          Leave and stop them
        </Press>
      </p>
    </Notice>
  );
}
