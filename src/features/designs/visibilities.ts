import type { DesignRow } from '#api';

/** Who sees a design, as it is chosen and as it is told. */
export const VISIBILITIES = [
  { value: 'team', label: 'The team' },
  { value: 'only me', label: 'Only me' },
] as const satisfies readonly { readonly value: DesignRow['visibility']; readonly label: string }[];

export function visibilityWords({ visibility }: Pick<DesignRow, 'visibility'>): string {
  return VISIBILITIES.find((one) => one.value === visibility)?.label ?? visibility;
}
