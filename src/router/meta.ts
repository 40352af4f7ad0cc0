import 'vue-router'
import type { Permission } from '#shared/permissions'
import type { LayoutName } from '../layouts/layouts'
import type { Station } from './stations'

declare module 'vue-router' {
  interface RouteMeta {
    /** The frame around the view; `staff` where nothing is said. */
    layout?: LayoutName
    /** `open`: nobody needs to be signed in. */
    access?: 'open'
    /** What the person's roles must allow; the server decides again. */
    permission?: Permission
    /** Areas of texts that the view shows, beside those of its layout. */
    texts?: readonly string[]
    /** Key of the page's title. */
    title?: string
    /** The notch of the header at which the pin hangs. */
    station?: Station
  }
}
