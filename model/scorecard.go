package model

// Reserved characteristics, asked for every loan.
const (
	Amount = "amount"
	Term   = "term"
)

// Reserved attributes.
const (
	Unknown       = "unknown"
	NotApplicable = "not_applicable"
	NothingLeft   = "nothing_left"
	Yes           = "yes"
	No            = "no"
)

// Base names the constant in a covariance.
const Base = "base"

// A Scorecard is everything a workbook says: plain data in the order of the
// workbook's rows, a field a column. The tags are the headers; a field with
// need:"yes" must be filled in. Compile makes an Edition of it.
type Scorecard struct {
	Card            Card
	Characteristics []Characteristic
	Attributes      []Attribute
	Lines           []Line
	Computed        []Formula
	Bands           []Band
	Rules           []Rule
	Terms           Terms
	Overrides       []Override
	Checks          []Check
	Covariance      *Covariance
	Words           []Wording
}

// Card is the sheet of facts about the whole edition.
type Card struct {
	Format          Count          `col:"Format" need:"yes"`
	ProductCode     string         `col:"Product code" need:"yes" as:"code"`
	Product         string         `col:"Product" need:"yes"`
	For             ClientKind     `col:"For clients" need:"yes"`
	Title           string         `col:"Title" need:"yes"`
	Edition         Count          `col:"Edition" need:"yes"`
	Lender          string         `col:"Lender" need:"yes"`
	DefaultMeans    string         `col:"Default means" need:"yes"`
	DefaultDaysLate Count          `col:"Default days late" need:"yes"`
	WithinMonths    Count          `col:"Within months" need:"yes"`
	HowMade         HowMade        `col:"How made" need:"yes"`
	IssuedOn        Date           `col:"Issued on" need:"yes"`
	InForceFrom     Date           `col:"In force from" need:"yes"`
	ReviewBy        Date           `col:"Review by" need:"yes"`
	LogOddsOf       Outcome        `col:"Log-odds of" need:"yes"`
	BaseLogOdds     LogOdds        `col:"Base log-odds" need:"yes"`
	Adjustment      Maybe[LogOdds] `col:"Later adjustment"`
	AdjustmentSE    Maybe[LogOdds] `col:"Later adjustment standard error"`
	ReferenceScore  Number         `col:"Reference score" need:"yes"`
	ReferenceOdds   Number         `col:"Reference odds" need:"yes"`
	PointsToDouble  Number         `col:"Points to double the odds" need:"yes"`
	ResultShown     Shown          `col:"Result shown" need:"yes"`
	AnswersGoodDays Count          `col:"Answers good for days" need:"yes"`
	LoansUsed       Maybe[Count]   `col:"Loans used"`
	DefaultsAmong   Maybe[Count]   `col:"Defaults among them"`
	HistoryUntil    Maybe[Date]    `col:"History until"`
	PreparedBy      string         `col:"Prepared by" need:"yes"`
	ApprovedBy      string         `col:"Approved by" need:"yes"`
	Complaints      string         `col:"Complaints contact" need:"yes"`
	Notes           string         `col:"Notes"`
}

// A Characteristic is one thing that is asked or computed.
type Characteristic struct {
	Code            string         `col:"Characteristic" need:"yes" as:"code"`
	Question        string         `col:"Question" need:"yes"`
	Section         string         `col:"Section"`
	Kind            Kind           `col:"Kind" need:"yes"`
	Unit            string         `col:"Unit"`
	Decimals        Count          `col:"Decimals"`
	LowestAccepted  Maybe[Number]  `col:"Lowest accepted"`
	HighestAccepted Maybe[Number]  `col:"Highest accepted"`
	CountedFrom     Maybe[Number]  `col:"Counted from"`
	CountedTo       Maybe[Number]  `col:"Counted to"`
	SeenFrom        Maybe[Number]  `col:"Seen from"`
	SeenTo          Maybe[Number]  `col:"Seen to"`
	Use             Use            `col:"Use" need:"yes"`
	LawfulGround    string         `col:"Lawful ground"`
	AskedOnlyIf     string         `col:"Asked only if"`
	UnknownAllowed  bool           `col:"Unknown allowed"`
	CarryOver       bool           `col:"Carry over"`
	EvidenceNeeded  Evidence       `col:"Evidence needed"`
	PapersAccepted  string         `col:"Papers accepted"`
	AverageLogOdds  Maybe[LogOdds] `col:"Average log-odds"`
	Help            string         `col:"Help"`
}

// An Attribute is one answer to a characteristic: a choice, a band of a
// number, a reserved attribute; or, with its own code left blank, the slope
// of a number.
type Attribute struct {
	Characteristic string         `col:"Characteristic" need:"yes" as:"code"`
	Code           string         `col:"Attribute" as:"code"`
	Label          string         `col:"Label"`
	From           Maybe[Number]  `col:"From"`
	Below          Maybe[Number]  `col:"Below"`
	LogOdds        Maybe[LogOdds] `col:"Log-odds"`
	Slope          Maybe[Slope]   `col:"Log-odds per unit"`
	StandardError  Maybe[Slope]   `col:"Standard error"`
	Share          Maybe[Rate]    `col:"Share of past loans"`
	Loans          Maybe[Count]   `col:"Loans"`
	Defaults       Maybe[Count]   `col:"Defaults"`
	Reason         string         `col:"Reason told to applicant"`
}

// A Line is one line of money of a worksheet.
type Line struct {
	Characteristic string `col:"Characteristic" need:"yes" as:"code"`
	Code           string `col:"Line" need:"yes" as:"code"`
	Label          string `col:"Label" need:"yes"`
	Flow           Flow   `col:"Adds or takes away" need:"yes"`
	Period         Period `col:"Usual period" need:"yes"`
}

// A Formula works out a computed characteristic. The signs are for sums; a
// ratio is its first part over its second; an instalment takes amount and
// term by itself.
type Formula struct {
	Characteristic string    `col:"Characteristic" need:"yes" as:"code"`
	Operation      Operation `col:"Operation" need:"yes"`
	Parts          [MostParts]Part
}

// MostParts is the most a sum or a product may have.
const MostParts = 8

// A Part is a term of a sum, or a factor.
type Part struct {
	Sign Sign   `col:"Sign"`
	Code string `col:"Part" as:"code"`
}

// A Band is a range of PD with what it recommends.
type Band struct {
	Code           string         `col:"Band" need:"yes" as:"code"`
	Label          string         `col:"Label" need:"yes"`
	From           Maybe[PD]      `col:"PD from"`
	Below          Maybe[PD]      `col:"PD below"`
	Recommendation Recommendation `col:"Recommendation" need:"yes"`
	OfficerLimit   Maybe[Number]  `col:"Officer limit"`
	ManagerLimit   Maybe[Number]  `col:"Manager limit"`
	Caution        string         `col:"Caution"`
}

// A Rule is one condition of a policy rule; the rows of one rule must all
// hold. Amount is the cap of a largest amount.
type Rule struct {
	Code           string        `col:"Rule" need:"yes" as:"code"`
	Label          string        `col:"Label"`
	Characteristic string        `col:"Characteristic" need:"yes" as:"code"`
	Test           Test          `col:"Test" need:"yes"`
	Value          Value         `col:"Value"`
	Effect         Effect        `col:"Effect"`
	Amount         Maybe[Number] `col:"Amount"`
	Text           string        `col:"Text"`
}

// Terms are the product's: what may be lent, and how it is paid back.
type Terms struct {
	Currency          string         `col:"Currency" need:"yes"`
	MoneyDecimals     Count          `col:"Money decimals" need:"yes"`
	SmallestAmount    Number         `col:"Smallest amount" need:"yes"`
	LargestAmount     Number         `col:"Largest amount" need:"yes"`
	AmountStep        Number         `col:"Amount step" need:"yes"`
	TermUnit          TermUnit       `col:"Term counted in" need:"yes"`
	ShortestTerm      Count          `col:"Shortest term" need:"yes"`
	LongestTerm       Count          `col:"Longest term" need:"yes"`
	Repayment         Repayment      `col:"Repayment" need:"yes"`
	LongestGrace      Maybe[Count]   `col:"Longest grace"`
	Rate              Rate           `col:"Rate" need:"yes"`
	RatePer           RatePer        `col:"Rate per" need:"yes"`
	Method            InterestMethod `col:"Interest method" need:"yes"`
	FeeRate           Maybe[Rate]    `col:"Fee rate"`
	FeeAmount         Maybe[Number]  `col:"Fee amount"`
	SavingsRate       Maybe[Rate]    `col:"Forced savings rate"`
	PaymentRoundedTo  Maybe[Number]  `col:"Payment rounded up to"`
	HighestYearlyCost Maybe[Rate]    `col:"Highest yearly cost"`
}

// An Override is a reason an officer may give for departing from the
// recommendation.
type Override struct {
	Code      string    `col:"Override" need:"yes" as:"code"`
	Label     string    `col:"Label" need:"yes"`
	Direction Direction `col:"Direction" need:"yes"`
}

// A Check is a specimen worked outside the workbook: one answer for each
// asked characteristic as of the day the card was issued, and what must come
// of them. Seen lists, with commas, the characteristics whose papers were seen.
type Check struct {
	Code           string
	Answers        []CheckAnswer
	Seen           string
	LogOdds        LogOdds
	PD             PD
	Score          Number
	Band           string
	Recommendation Recommendation
}

// A CheckAnswer is a characteristic's code and the answer in canonical text.
type CheckAnswer struct{ Characteristic, Answer string }

// A Covariance is the square of the estimated coefficients' covariances.
type Covariance struct {
	Names  []string
	Values [][]Covar
}

// A Wording is a sentence of the lender's own, or a label of the edition, in
// one language (a tag such as "fr").
type Wording struct {
	Code     string `col:"Code" need:"yes"`
	Language string `col:"Language" need:"yes"`
	Text     string `col:"Text" need:"yes"`
}
