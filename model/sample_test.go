package model

import (
	"slices"
	"strings"
	"testing"
)

// sample is an invented scorecard with something of everything, as tables:
// a sheet's name, its headers, its rows, a blank line. The log-odds of its checks were summed
// by hand; PD and score are R's plogis and 600 - 20/log(2)·(log-odds + log(50)).
const sample = `
Card
Item | Value
Format | 1
Product code | market
Product | Market loan
For clients | all
Title | Market loan scorecard
Edition | 3
Lender | Marlow Fen Savings and Loan
Default means | more than 30 days behind
Default days late | 30
Within months | 12
How made | estimated and judged
Issued on | 2026-02-01
In force from | 2026-03-01
Review by | 2027-03-01
Log-odds of | default
Base log-odds | -2
Later adjustment | 0.1
Later adjustment standard error | 0.05
Reference score | 600
Reference odds | 50
Points to double the odds | 20
Result shown | when complete
Answers good for days | 30
Loans used | 1200
Defaults among them | 150
History until | 2025-12-31
Prepared by | A. Quill
Approved by | B. Stone
Complaints contact | the branch

Characteristics
Characteristic | Question | Kind | Decimals | Lowest accepted | Highest accepted | Counted from | Counted to | Seen from | Seen to | Use | Lawful ground | Asked only if | Unknown allowed | Average log-odds
trade | What is the trade? | choice | | | | | | | | scored | | | | 0.1
own_stall | Is the stall their own? | yes/no | | | | | | | | scored | | trade is not farm | | -0.05
seasons | Which season sells best? | choice | | | | | | | | recorded | | own_stall is yes | |
years | How many years in the trade? | number | | | 60 | 0 | 20 | 0 | 30 | scored | | | yes | -0.2
born | When was the applicant born? | date | | 1900 | 2020 | | | | | recorded | minimum age to contract | | |
age | Age | computed | | | | | | | | recorded | minimum age to contract | | |
age_end | Age at the last payment | computed | | | | | | | | recorded | minimum age to contract | | |
household | What does the household make and spend? | worksheet | 2 | | | | | | | recorded | | | |
debts | What is paid on other debts each month? | number | 2 | 0 | | | | | | recorded | | | yes |
payment | Payment | computed | 2 | | | | | | | recorded | | | |
left | Left each month | computed | 2 | | | | | | | recorded | | | |
share | Payment as a share of what is left | computed | 3 | | | | | 0 | 2 | scored | | | | 0.05
exposure | Amount times term | computed | 2 | | | | | | | recorded | | | |
guarantor | Is there a guarantor? | yes/no | | | | | | | | recorded | | | |
sex | Sex | choice | | | | | | | | watched | | | |

Attributes
Characteristic | Attribute | Label | From | Below | Log-odds | Log-odds per unit | Standard error | Loans | Defaults | Reason told to applicant
trade | stall | Stall | | | 0 | | | 600 | 80 |
trade | farm | Farm | | | 0.25 | | 0.1 | 400 | 60 | The trade is a farm
trade | workshop | Workshop | | | -0.3 | | 0.2 | 40 | 4 |
own_stall | yes | Yes | | | -0.2 | | 0.1 | | |
own_stall | no | No | | | 0.1 | | 0.1 | | | The stall is not their own
own_stall | not_applicable | Not asked | | | 0 | | | | |
seasons | spring | Spring | | | | | | | |
seasons | autumn | Autumn | | | | | | | |
years | few | Under 3 | | 3 | 0.4 | | 0.1 | | | Little time in the trade
years | some | 3 and more | 3 | | 0 | | | | |
years | | | | | | -0.0305 | 0.01 | | | Time in the trade
years | unknown | Not known | | | 0.3 | | 0.2 | | |
share | low | Under 0.3 | | 0.3 | -0.1 | | 0.1 | | |
share | middle | 0.3 to 0.6 | 0.3 | 0.6 | 0.2 | | 0.1 | | | The payment is large for what is left
share | high | 0.6 and more | 0.6 | | 0.7 | | 0.1 | | | The payment is too large for what is left
share | unknown | Not known | | | 0.5 | | 0.2 | | |
share | nothing_left | Nothing left | | | 0.9 | | 0.3 | | | Nothing is left each month
sex | woman | Woman | | | | | | | |
sex | man | Man | | | | | | | |

Lines
Characteristic | Line | Label | Adds or takes away | Usual period
household | sales | Sales | adds | week
household | wages | Wages | adds | month
household | rent | Rent | takes away | month
household | school | School | takes away | year

Computed
Characteristic | Operation | Sign 1 | Part 1 | Sign 2 | Part 2
age | whole years | | born | |
age_end | age at last payment | | born | |
payment | instalment | | | |
left | sum | plus | household | minus | debts
share | ratio | | payment | | left
exposure | product | | amount | | term

Bands
Band | Label | PD from | PD below | Recommendation | Officer limit | Manager limit | Caution
a | Low | | 0.1 | approve | 2000 | 5000 |
b | Middle | 0.1 | 0.2 | refer | | 3000 | Look twice
c | High | 0.2 | | decline | | |

Rules
Rule | Label | Characteristic | Test | Value | Effect | Amount | Text
young | Under age | age | below | 18 | decline | | The applicant is under age
old | Old at the end | age_end | above | 75 | refer | |
papers | No papers | household | told only | | refer | | Nothing was seen
debts | Debts not known | debts | unknown | | largest amount | 1000 |
farms | Long farm loan | trade | one of | farm, workshop | note | |
farms | | term | at least | 24 | | |
heavy | Heavy payment | share | at least | 0.6 | refer | |
stalls | Stall of another | trade | is | stall | largest amount | 1500 |
stalls | | own_stall | is not | yes | | |
stalls | | guarantor | is | no | | |
short | Short loan | term | at most | 3 | note | |
middle | Middling | exposure | between | 9000 to 10000 | note | |

Terms
Item | Value
Currency | crowns
Money decimals | 2
Smallest amount | 100
Largest amount | 5000
Amount step | 100
Term counted in | months
Shortest term | 3
Longest term | 36
Repayment | equal payments
Rate | 0.24
Rate per | year
Interest method | declining

Overrides
Override | Label | Direction
known | Well known here | riskier
rumour | Bad word in the market | safer

Checks
Check | amount | term | trade | own_stall | seasons | years | born | household | debts | guarantor | sex | Seen | Log-odds | PD | Score | Band | Recommendation
one | 1000 | 12 | stall | yes | spring | 5 | 1980-05-06 | sales:100/week wages:50/month rent:80/month school:240/year | 20 | no | woman | household | -2.3525 | 0.086867264 | 555.001678 | a | approve
two | 400 | 24 | farm | not_applicable | not_applicable | 1 | 1950 | 300 | 10 | yes | man | | -1.3805 | 0.20092871 | 526.955686 | c | decline
three | 400 | 3 | workshop | no | not_applicable | unknown | 2009-01-01 | 160 | 0 | no | man | household | -1.1 | 0.249739894 | 518.862167 | c | decline
four | 1500 | 6 | stall | no | not_applicable | 10 | 1990-12-31 | 1000 | unknown | no | woman | household | -1.605 | 0.167283956 | 533.433387 | b | refer
five | 800 | 12 | workshop | yes | autumn | 20 | 1970-01-31 | 0 | 5 | yes | woman | household | -2.11 | 0.108128667 | 548.004607 | b | refer
six | 600 | 10 | workshop | yes | autumn | 2 | 1970-01-31 | 200 | 0 | no | woman | household | -1.861 | 0.134586536 | 540.819986 | b | refer

Covariance
Coefficient | base | trade.farm | trade.workshop | own_stall.yes | own_stall.no | years.few | years | years.unknown | share.low | share.middle | share.high | share.unknown | share.nothing_left
base | 0.04 | -0.002 | 0 | 0 | 0 | 0 | -0.0001 | 0 | 0 | 0 | 0 | 0 | 0
trade.farm | -0.002 | 0.01 | 0 | 0 | 0 | 0 | 0 | 0 | 0 | 0 | 0 | 0 | 0
trade.workshop | 0 | 0 | 0.04 | 0 | 0 | 0 | 0 | 0 | 0 | 0 | 0 | 0 | 0
own_stall.yes | 0 | 0 | 0 | 0.01 | 0 | 0 | 0 | 0 | 0 | 0 | 0 | 0 | 0
own_stall.no | 0 | 0 | 0 | 0 | 0.01 | 0 | 0 | 0 | 0 | 0 | 0 | 0 | 0
years.few | 0 | 0 | 0 | 0 | 0 | 0.01 | 0 | 0 | 0 | 0 | 0 | 0 | 0
years | -0.0001 | 0 | 0 | 0 | 0 | 0 | 0.0001 | 0 | 0 | 0 | 0 | 0 | 0
years.unknown | 0 | 0 | 0 | 0 | 0 | 0 | 0 | 0.04 | 0 | 0 | 0 | 0 | 0
share.low | 0 | 0 | 0 | 0 | 0 | 0 | 0 | 0 | 0.01 | 0 | 0 | 0 | 0
share.middle | 0 | 0 | 0 | 0 | 0 | 0 | 0 | 0 | 0 | 0.01 | 0 | 0 | 0
share.high | 0 | 0 | 0 | 0 | 0 | 0 | 0 | 0 | 0 | 0 | 0.01 | 0 | 0
share.unknown | 0 | 0 | 0 | 0 | 0 | 0 | 0 | 0 | 0 | 0 | 0 | 0.04 | 0
share.nothing_left | 0 | 0 | 0 | 0 | 0 | 0 | 0 | 0 | 0 | 0 | 0 | 0 | 0.09

Words
Code | Language | Text
trade.stall | fr | Étal
trade.stall | es | Puesto
`

// sheetsOf reads tables as written above.
func sheetsOf(text string) []Sheet {
	var sheets []Sheet
	for block := range strings.SplitSeq(strings.TrimSpace(text), "\n\n") {
		lines := strings.Split(block, "\n")
		sheet := Sheet{Name: lines[0], Columns: cellsOf(lines[1])}
		for _, line := range lines[2:] {
			sheet.Rows = append(sheet.Rows, cellsOf(line))
		}
		sheets = append(sheets, sheet)
	}
	return sheets
}

func cellsOf(line string) []string {
	cells := strings.Split(line, "|")
	for i := range cells {
		cells[i] = strings.TrimSpace(cells[i])
	}
	return cells
}

// scorecardOf reads tables and fails the test where that cannot be done.
func scorecardOf(t testing.TB, text string) Scorecard {
	t.Helper()
	s, problems := FromSheets(sheetsOf(text))
	for _, p := range problems {
		t.Errorf("%v", p)
	}
	return s
}

// compiled fails the test where there is any problem but those expected.
func compiled(t testing.TB, s Scorecard, expected ...string) *Edition {
	t.Helper()
	e, problems := Compile(s)
	for _, p := range problems {
		if !slices.Contains(expected, p.Code) {
			t.Errorf("%v", p)
		}
	}
	if e == nil {
		t.Fatal("no edition")
	}
	return e
}

// answered reads answers such as "amount 1000" and fails the test where one
// does not read; "!" after an answer tells that a paper was seen.
func answered(t testing.TB, e *Edition, answers ...string) *Answers {
	t.Helper()
	a := e.NewAnswers(e.card.Card.IssuedOn, NewClients)
	for _, line := range answers {
		code, text, _ := strings.Cut(line, " ")
		item, ok := e.Item(code)
		if !ok {
			t.Fatalf("no characteristic %q", code)
		}
		answer, err := e.ParseAnswer(item.Index, strings.TrimSuffix(text, "!"))
		if err != nil {
			t.Fatalf("%s: %v", line, err)
		}
		answer.Seen = strings.HasSuffix(text, "!")
		a.Put(item.Index, answer)
	}
	return a
}

func TestSampleCompiles(t *testing.T) {
	compiled(t, scorecardOf(t, sample))
}

// sampleAnswers are the first check's.
func sampleAnswers(t testing.TB, e *Edition) *Answers {
	return answered(t, e, "amount 1000", "term 12", "trade stall", "own_stall yes", "seasons spring", "years 5", "born 1980-05-06",
		"household sales:100/week wages:50/month rent:80/month school:240/year!", "debts 20", "guarantor no", "sex woman")
}

// partOf reads tables that lack sheets; its card and its terms are sample's.
func partOf(text string) Scorecard {
	sheets := sheetsOf(text)
	for _, sheet := range sheetsOf(sample) {
		if sheet.Name == "Card" || sheet.Name == "Terms" {
			sheets = append(sheets, sheet)
		}
	}
	s, _ := FromSheets(sheets)
	return s
}
