package duty_test

import (
	"fmt"
	"testing"

	"weighhouse/model/duty"
)

// Every cell, written a second time by who may: the two must be changed
// together, on purpose.
func TestWhoMayDoWhat(t *testing.T) {
	const o, m, a, h, v = duty.Officer, duty.Manager, duty.ActingManager, duty.HeadOffice, duty.Visitor
	may := map[duty.Act][]duty.Role{
		duty.SetUp:          {m},
		duty.ConfirmDate:    {o, m, a, h},
		duty.ReleaseEdition: {m, a, h},
		duty.KeepResult:     {o, m, a},
		duty.ClearResult:    {o, m, a},
		duty.ReadEditions:   {o, m, a, h, v},
		duty.ReadResults:    {o, m, a, h, v},
		duty.Prove:          {o, m, a, h, v},
	}
	if len(may) != len(duty.Acts()) {
		t.Fatalf("%d acts, %d tested", len(duty.Acts()), len(may))
	}
	for _, act := range duty.Acts() {
		allowed := map[duty.Role]bool{}
		for _, role := range may[act] {
			allowed[role] = true
		}
		for _, role := range duty.Roles() {
			if got := duty.May(role, act); got != allowed[role] {
				t.Errorf("%s %s: %v", role, act, got)
			}
		}
	}
}

func TestTheUnknownMayNothing(t *testing.T) {
	if duty.May("", duty.ReadEditions) || duty.May("owner", duty.ReadEditions) || duty.May(duty.Manager, "") || duty.May(duty.Manager, "erase_journal") {
		t.Error("an unknown role or act is allowed")
	}
}

func ExampleMay() {
	fmt.Println(duty.May(duty.Officer, duty.KeepResult), duty.May(duty.Officer, duty.ReleaseEdition))
	// Output: true false
}
