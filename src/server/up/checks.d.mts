interface Report {
  success: boolean;
  testResults: { status: string; assertionResults: { status: string }[] }[];
}
interface ReportOfTries {
  testResults: {
    name: string;
    assertionResults: { status: string; fullName: string; failureMessages: string[] }[];
  }[];
}
export function countReport(report: Report): { passed: number; failed: number };
export function triedAgain(report: ReportOfTries): string[];
