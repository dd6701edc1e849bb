/** One action of a menu. */
export interface MenuItem { readonly id: string, readonly label: string, readonly danger?: boolean }
