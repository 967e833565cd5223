import type { Scheme } from "../../src/report/palette.js";
import type { Session } from "../page/session.js";
import { Backdrop } from "./Backdrop.js";
import { Busy } from "./Busy.js";
import { ChooseFile } from "./ChooseFile.js";
import { Failed } from "./Failed.js";
import "./opening.css";
import { SampleList } from "./SampleList.js";

interface Props {
  readonly session: Session;
  readonly scheme: Scheme;
}

/** What stands on the sheet while there is no field, or over it while there is something to say. */
export function Opening({ session, scheme }: Props) {
  return (
    <>
      {session.map.value === undefined ? <Backdrop scheme={scheme} /> : null}
      <Said session={session} />
    </>
  );
}

function Said({ session }: { readonly session: Session }) {
  const stage = session.stage.value;
  switch (stage.kind) {
    case "looking":
      return null;
    case "busy":
      return <Busy session={session} stage={stage} />;
    case "failed":
      return <Failed session={session} stage={stage} />;
    case "idle":
      return session.map.value === undefined ? <Empty session={session} /> : null;
  }
}

function Empty({ session }: { readonly session: Session }) {
  return (
    <main class="cartouche" aria-labelledby="opening-title">
      <p class="cartouche-name">Latchmap</p>
      <h1 id="opening-title">Where, when and how far back does a&nbsp;system use its own past?</h1>
      <p>
        Drop a recording on this sheet: a <strong>.npy</strong> array or a <strong>.csv</strong>{" "}
        table, one row for each time step.
      </p>
      <p>
        <ChooseFile session={session}>Choose a file</ChooseFile>
      </p>
      <div class="cartouche-rule" />
      <p class="cartouche-lead">Or lay out an invented sample</p>
      <SampleList session={session} />
      <p class="cartouche-foot">It is read and mapped on this machine. Nothing is sent anywhere.</p>
    </main>
  );
}
