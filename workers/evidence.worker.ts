import { runEvidence, type EvidenceNews, type EvidenceOrder } from '#shared/workbench/run-evidence'

/** Works out the evidence beside the page, so that typing and dragging never wait for it. */
let latest = 0

const breathe = () => new Promise<void>((resolve) => setTimeout(resolve, 0))

self.addEventListener('message', (event: MessageEvent<EvidenceOrder>) => {
  const { order } = event.data
  latest = Math.max(latest, order)
  void runEvidence(event.data, {
    breathe,
    isStale: () => order < latest,
    emit: (news: EvidenceNews) => self.postMessage(news),
  })
})
