package vault_test

import (
	"fmt"

	"weighhouse/store/vault"
)

// A person's passphrase opens the branch; what was sealed before is read, and
// what was committed to is checked.
func Example() {
	keys := vault.Keys{Data: vault.NewDataKey(), Signing: vault.NewSigningKey()}
	locked := keys.Lock("seven bags of barley", "person 1")

	cell := vault.Cell{Table: "results", Column: "kept", Row: 12}
	sealed, committed := keys.Data.Seal(cell, "trade\tmarket_stall")

	again, err := vault.Unlock(locked, "seven bags of barley", "person 1")
	if err != nil {
		fmt.Println(err)
		return
	}
	text, commitment, err := again.Data.Open(cell, sealed)
	fmt.Printf("%q %v %v\n", text, commitment == committed, err)
	// Output: "trade\tmarket_stall" true <nil>
}
