import type { Ref } from 'vue'

/** Width a chart is drawn at before its box can be measured: that of a phone's page or of a desk's column [px]. */
const PHONE_PX = 358
const DESK_PX = 720

/** Whether the request comes from a phone, as far as its headers say; kept so that the browser starts from the same. */
function usePhoneGuess(): Ref<boolean> {
  return useState('phone-guess', () => {
    const headers = useRequestHeaders(['sec-ch-ua-mobile', 'user-agent'])
    return headers['sec-ch-ua-mobile'] === '?1' || /\bMobi/.test(headers['user-agent'] ?? '')
  })
}

/**
 * The width of an element in whole pixels, following it as it changes. On the server, and until the page is alive, it is a
 * guess from the request, so that the first drawing is already near and hydration sees the same.
 */
export function useBoxWidth(box: Readonly<Ref<HTMLElement | null>>): Ref<number> {
  const phone = usePhoneGuess()
  const width = ref(phone.value ? PHONE_PX : DESK_PX)
  let observer: ResizeObserver | undefined
  onMounted(() => {
    const element = box.value
    if (!element) return
    const measure = () => {
      const measured = Math.round(element.clientWidth)
      if (measured > 0) width.value = measured
    }
    measure()
    observer = new ResizeObserver(measure)
    observer.observe(element)
  })
  onBeforeUnmount(() => observer?.disconnect())
  return width
}
