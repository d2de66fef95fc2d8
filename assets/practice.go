package assets

import _ "embed"

// The practice branch: everything in it is invented. Its workbooks are the
// source of its scorecards, as head office would send them; history.R beside
// them makes the loan history that the first was estimated from.
var (
	//go:embed practice/working_capital-edition-1-2026-03-01.xlsx
	workingCapital []byte
	//go:embed practice/farm_season-edition-2-2026-03-01.xlsx
	farmSeason []byte
	//go:embed practice/applications.csv
	practiceApplications []byte
)

// PracticeWorkbooks are the practice branch's scorecards, the main one first.
func PracticeWorkbooks() [][]byte { return [][]byte{workingCapital, farmSeason} }

// PracticeApplications are past applications in order of their days: a header
// row with ref, name, on, client, product, the codes of what is asked, a
// worksheet's lines as code.line, and seen, the codes whose papers were seen;
// then a row an application in canonical text.
func PracticeApplications() []byte { return practiceApplications }
