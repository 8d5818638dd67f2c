export const holesPath = (depositId: number): string => `/deposits/${depositId}/holes`;
export const holePath = (depositId: number, hole: string): string => `${holesPath(depositId)}/${encodeURIComponent(hole)}`;
