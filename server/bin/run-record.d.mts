export function claimDataFolder(
  data: string,
  address: string,
): Promise<{ note: (child: { pid?: number | undefined }) => void; letGo: () => void }>;
