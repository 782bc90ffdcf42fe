interface Report {
  success: boolean;
  testResults: { status: string; assertionResults: { status: string }[] }[];
}
export function countReport(report: Report): { passed: number; failed: number };
