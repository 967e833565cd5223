import { effect } from "@preact/signals";
import { render } from "preact";
import { acceptDrops } from "./opening/drop.js";
import { Page } from "./page/Page.js";
import { followScheme } from "./page/scheme.js";
import { startSession } from "./page/session.js";

const page = document.getElementById("page");
if (page !== null) {
  const session = startSession();
  const choice = followScheme(document.documentElement);
  acceptDrops(page, session);
  effect(() => {
    const title = session.map.value?.title;
    document.title = title === undefined ? "Latchmap" : `${title} – Latchmap`;
  });
  render(<Page session={session} choice={choice} />, page);
  session.openServedResult(new URL("result/", document.baseURI).href);
}
