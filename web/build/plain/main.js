// The plain page, which our start is measured against: packed like ours, but Python's
// library as .py, numpy by loadPackage, nothing of ours.
import { takeEmbedded } from "../../src/embedded.js";

const parts = takeEmbedded();
parts.url.then((url) => {
  const worker = new Worker(url);
  worker.onmessage = ({ data }) => {
    document.getElementById("status").textContent = data;
    document.documentElement.dataset.state = "ready";
  };
  for (const message of parts.messages) message.then((ready) => worker.postMessage(ready));
});
