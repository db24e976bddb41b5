export const lineChart = "lineChart";
