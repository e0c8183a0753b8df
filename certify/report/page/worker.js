// Behind the checker in a Worker: it says that it is ready; then files in, one message an item,
// and a last one.
onmessage = async ({ data }) => {
  try {
    for await (const item of checkFolder(readerOf(data))) postMessage({ item });
    postMessage({ end: true });
  } catch (error) {
    postMessage({ crash: String(error) });
  }
};
postMessage({ ready: true });
