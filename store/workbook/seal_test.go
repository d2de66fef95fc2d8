package workbook

import (
	"bytes"
	"crypto/ed25519"
	"slices"
	"testing"

	"weighhouse/assets"
	"weighhouse/model"
)

func TestSeal(t *testing.T) {
	card := read(assets.PracticeWorkbooks()[0]).Scorecard
	public, key, err := ed25519.GenerateKey(nil)
	if err != nil {
		t.Fatal(err)
	}
	sealed := func(s model.Scorecard) *Reading {
		t.Helper()
		var b bytes.Buffer
		if err := WriteSealed(&b, s, key); err != nil {
			t.Fatal(err)
		}
		return read(b.Bytes())
	}
	rd := sealed(card)
	if rd.Edition == nil || rd.Seal == nil || !rd.Seal.PublicKey.Equal(public) {
		t.Fatalf("a sealed workbook: seal %v, %v", rd.Seal, rd.Problems)
	}
	if rd.Edition.Fingerprint() != card.Fingerprint() {
		t.Error("a seal changed the fingerprint")
	}
	// The seal of one scorecard in the workbook of another.
	other := card
	other.Card.Notes += " Changed."
	bk := sealed(other)
	bk.Seal.Signature = rd.Seal.Signature
	bk.Problems = nil
	bk.checkSeal()
	if !slices.ContainsFunc(bk.Problems, func(p model.Problem) bool { return p.Code == "seal_broken" && !p.Warning }) {
		t.Errorf("a seal of another scorecard was taken: %v", bk.Problems)
	}
	// A seal that is none.
	bk = &Reading{}
	rest := bk.readSeal([]*table{{Sheet: model.Sheet{Name: "Seal", Rows: [][]string{{"Public key", "12"}}}}})
	if len(rest) != 0 || len(bk.Problems) != 1 || bk.Problems[0].Code != "seal_unreadable" {
		t.Errorf("%v %v", rest, bk.Problems)
	}
}
