// Package model is what a scorecard is and what it says of an applicant. It
// does arithmetic and nothing else: no input or output, no clock, no state of
// its own, and no sentence for people's eyes.
//
// # The story
//
// Head office writes a scorecard as a workbook. A reader of workbooks turns it
// into tables of text ([Sheet], described by [Forms]); [FromSheets] makes a
// [Scorecard] of them, plain data with a field a column; [Compile] checks all
// that it says, works its specimens, and makes an [Edition]: numbered, frozen,
// in tables made for scoring. Both list everything wrong as a [Problem] with
// its place, so that it can be mended in one go.
//
// An officer's entries are [Answers]. [Edition.Score] says what the edition
// makes of them when none is missing, [Edition.Bound] what may still come of
// them while some are.
//
//	Sheets ── FromSheets ──▶ Scorecard ── Compile ──▶ Edition
//	                                                     │ NewAnswers, Put
//	                        Result ◀── Score ──────── Answers
//	                        Bounds ◀── Bound
//
// Why a result is what it is: [Edition.Steps] are the parts of its sum,
// [Edition.Reasons] those that speak against it, and Result.Fired tells which of
// [Edition.Rules] overrode it. How far it can be trusted: [Edition.Range] is its
// sampling error, [Edition.Ground] where it goes beyond what the edition was
// made from. What else could be done: [Edition.TermsThatFit]. What is kept: the
// canonical texts of [Scorecard.Canonical] and [Answers.Text], which score the
// same to the last digit for ever; [Answers.Carry] takes answers over to another
// edition.
//
// # The sum
//
//	log-odds of default = base + later adjustment + Σ log-odds of each answer
//	PD    = 1 / (1 + e^-log-odds)
//	score = reference score - (points to double / ln 2) × (log-odds + ln(reference odds))
//
// A choice has the log-odds of the attribute picked. A number has those of the
// band it falls in (From is included, Below is not), and those of a slope times
// the number, or both; either way it is first clamped to what is counted.
// Higher log-odds are riskier, a higher score is safer. On paper the same sum is
// [Edition.Points] added to the score of [Edition.Constant].
//
// Nothing is lost on the way: [LogOdds] are whole billionths and summed as
// such, in any order; [Number] is a decimal of whole millionths; a [Slope] times
// a Number is rounded once. Only what follows the sum is floating point, in
// arithmetic that is the same on every processor (exp.go); its results are
// rounded to fixed places, and score bands are decided on the rounded PD.
//
// # What a characteristic comes to
//
// A question is answered (Given), answered "unknown", not asked
// (not applicable) or still missing. A computed characteristic is worked out
// from others, and a ratio may have nothing left to divide by. Each of unknown,
// not_applicable and nothing_left has an attribute of that name, with log-odds
// of its own; Compile demands it wherever a scored characteristic can come to
// that.
//
//   - One unknown part makes a computed characteristic unknown: what is not
//     known is not known to be anything else. Failing that, nothing left makes
//     it nothing left, and not asked makes it not asked; but in a sum what was
//     not asked counts 0, as another loan's payment does for who has none.
//   - A question is asked only if the answer to an earlier one is among some.
//     An earlier one that is unknown or not asked itself is among none.
//   - Ratios, products, instalments and a worksheet's month are rounded once, to
//     the characteristic's decimals, before they fall in a band. Halves go up,
//     towards plus infinity, for negative numbers too: -0.125 becomes -0.12. A
//     spreadsheet's ROUND would make it -0.13; FLOOR(x·100+0.5)/100 does as we do.
//   - "Accepted" limits raise a question and stop nothing; "counted" limits clamp
//     what is scored, never what is kept. Rules see the number itself, except
//     that a band named in a rule is the band that was scored.
//   - Who was born on 29 February is a year older on 1 March of a common year. A
//     year alone counts as its 1 July.
//
// # What follows the score
//
// The PD falls in a score band, which recommends to approve, refer or decline.
// Policy rules come after and can only be stricter: the strictest wins, every
// rule that fired is told, the least of the largest amounts stands. A cap does
// not change the recommendation: "approve, at most 500" is what an officer can
// use, and what was asked is not the model's to change.
//
// A rule's tests are of what is known. Unknown and not asked meet no
// comparison, not even "is not", so that no rule fires on a guess; a lender who
// wants one to fire says so: "unknown", "is not_applicable". Nothing left is
// beyond every number: "above" and "at least" hold of it. "Told only" is about a
// paper for a known answer; of a computed one it holds if any part was only
// told.
//
// Reasons follow the path that was taken: the rule that declined; else the
// scored characteristics that lie furthest above their development average,
// strictly above. At the average an answer spoke against nobody, so it is no
// reason even where there are fewer than four.
//
// # While answers are missing
//
// Every characteristic has a set of values that it may still come to
// (possible.go) and from the sets come [Bounds]: never too narrow, so that what
// they call settled stays settled; tight unless one missing answer is a part of
// two others. A rule then fires surely, perhaps or not ([Truth]).
//
// # Reading the source
//
// In this order: scorecard.go and enums.go (the data), number.go, logodds.go and
// pd.go (the arithmetic), edition.go, answers.go, value.go, computed.go,
// score.go, rules.go and ruletest.go (a result), reasons.go, range.go, ground.go
// (what it rests on), possible.go and bounds.go (what may come), compile.go and
// the files it names (what is refused), sheet.go, decode.go, encode.go and
// canonical.go (text). Package loan, below this one, has the schedules.
package model
