// The engine beside the page: answers each definition with its preview, the latest first.
import { previewDefinition } from './preview.ts'

export type PreviewRequest = { id: number; definition: unknown }

self.onmessage = ({ data }: MessageEvent<PreviewRequest>) => {
  self.postMessage({ id: data.id, preview: previewDefinition(data.definition, 200, () => performance.now()) })
}
