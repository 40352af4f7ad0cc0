/** Places in layouts that a view may fill, each an element with the id `layout-<place>`. */
export type LayoutPlace = 'scan-bed' | 'bench-header' | 'renter-shop' | 'renter-aside'
