// Package duty says who may do what, in one table. The store asks it for
// every act; nothing else decides.
package duty

// A Role is what a person is at a branch.
type Role string

const (
	Officer       Role = "officer"
	Manager       Role = "manager"
	ActingManager Role = "acting_manager" // a manager for a time
	HeadOffice    Role = "head_office"
	Visitor       Role = "visitor" // reads only, such as an auditor
)

// Roles lists every role in the table's order.
func Roles() []Role { return []Role{Officer, Manager, ActingManager, HeadOffice, Visitor} }

// An Act is something a signed-in person does. What changes something stands
// in the journal under this name.
type Act string

const (
	SetUp          Act = "set_up"          // the branch, its desk and its first person
	ConfirmDate    Act = "confirm_date"    // today's date, where the clock is doubtful
	ReleaseEdition Act = "release_edition" // a scorecard edition
	KeepResult     Act = "keep_result"     // complete answers and what the edition says of them
	ClearResult    Act = "clear_result"    // mark a kept result as cleared
	ReadEditions   Act = "read_editions"
	ReadResults    Act = "read_results"
	Prove          Act = "prove" // score every kept result again and walk the journal
)

// Acts lists every act in the table's order.
func Acts() []Act {
	return []Act{SetUp, ConfirmDate, ReleaseEdition, KeepResult, ClearResult, ReadEditions, ReadResults, Prove}
}

// table has a row an act and a column a role, in the order of Roles.
var table = map[Act][5]bool{
	//               officer manager acting head office visitor
	SetUp:          {false, true, false, false, false},
	ConfirmDate:    {true, true, true, true, false},
	ReleaseEdition: {false, true, true, true, false},
	KeepResult:     {true, true, true, false, false},
	ClearResult:    {true, true, true, false, false},
	ReadEditions:   {true, true, true, true, true},
	ReadResults:    {true, true, true, true, true},
	Prove:          {true, true, true, true, true},
}

// May tells whether a role may do an act; an unknown role or act may not.
func May(role Role, act Act) bool {
	for i, r := range Roles() {
		if r == role {
			return table[act][i]
		}
	}
	return false
}
