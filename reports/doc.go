// Package reports writes what an assessment found out: a self-contained HTML report,
// JSON, CSV files and terminal tables, and the cautions and gates that go with them.
//
// It computes no physics. Every number comes from a [hazewright.Result]; figures,
// their units and their titles come from [hazewright.Figures], so that all outputs
// agree. Values are SI in JSON and CSV, and in each figure's shown unit elsewhere.
//
// All outputs are deterministic: the same result and provenance give the same bytes.
// Names, causes and sources in a result may come from a study file of unknown
// origin. They are data here: escaped in HTML, free of control characters in
// tables, guarded against spreadsheet formulas in CSV. No NaN or infinity passes;
// [HTML], [JSON], [CSV], [Table] and [CompareTable] return an error that names the
// place instead.
//
// The charts are Apache ECharts, which the report carries within itself
// (assets/echarts.custom.min.js, built by assets/build.sh); go-echarts builds their
// options. The page comes from this package's own template: its content security
// policy allows the two embedded scripts and the style sheet by their hashes and
// nothing else, so a report neither loads nor runs anything from outside.
package reports
