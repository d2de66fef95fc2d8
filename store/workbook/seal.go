package workbook

import (
	"crypto/ed25519"
	"encoding/hex"
	"io"
	"slices"

	"weighhouse/model"
)

// A Seal is head office's signature (Ed25519, RFC 8032) over the fingerprint of
// a scorecard, with the key it was made by. Whose key it is the workbook
// cannot prove: that is compared elsewhere.
type Seal struct {
	PublicKey ed25519.PublicKey
	Signature []byte
}

var sealForm = model.SheetForm{Name: "Seal", Items: true, Optional: true, Columns: []model.Column{
	{Name: "Public key", Kind: model.TextColumn, Required: true},
	{Name: "Signature", Kind: model.TextColumn, Required: true},
}}

// WriteSealed is Write with the seal of a key.
func WriteSealed(w io.Writer, s model.Scorecard, key ed25519.PrivateKey) error {
	edition, _ := model.Compile(s)
	fingerprint := s.Fingerprint()
	public := key.Public().(ed25519.PublicKey)
	return write(w, s, func(b *builder) {
		b.sheet(sealForm, model.Sheet{Name: sealForm.Name, Columns: []string{"Item", "Value"}, Rows: [][]string{
			{"Public key", hex.EncodeToString(public)},
			{"Signature", hex.EncodeToString(ed25519.Sign(key, fingerprint[:]))},
		}})
		if edition != nil {
			b.tryIt(s, edition)
		}
	})
}

// readSeal takes the sheet Seal out of the tables; nil where there is none or
// what it says is no seal, which is then a problem.
func (rd *Reading) readSeal(tables []*table) []*table {
	i := slices.IndexFunc(tables, func(t *table) bool { return t.Name == sealForm.Name })
	if i < 0 {
		return tables
	}
	said := map[string]string{}
	for _, row := range tables[i].Rows {
		if len(row) >= 2 {
			said[row[0]] = row[1]
		}
	}
	key, err1 := hex.DecodeString(said["Public key"])
	signature, err2 := hex.DecodeString(said["Signature"])
	if err1 != nil || err2 != nil || len(key) != ed25519.PublicKeySize || len(signature) != ed25519.SignatureSize {
		rd.Problems = append(rd.Problems, model.Problem{Code: "seal_unreadable", Place: model.Place{Sheet: sealForm.Name}})
	} else {
		rd.Seal = &Seal{key, signature}
	}
	return slices.Delete(slices.Clone(tables), i, i+1)
}

// checkSeal sees that the seal is this scorecard's.
func (rd *Reading) checkSeal() {
	if rd.Seal == nil {
		return
	}
	if f := rd.Scorecard.Fingerprint(); !ed25519.Verify(rd.Seal.PublicKey, f[:], rd.Seal.Signature) {
		rd.Problems = append(rd.Problems, model.Problem{Code: "seal_broken", Place: model.Place{Sheet: sealForm.Name}})
	}
}
