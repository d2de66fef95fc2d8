package store

import (
	"context"
	"os"
	"strconv"
	"time"

	"weighhouse/model/duty"
	"weighhouse/store/vault"
)

// A Founding is what a new branch starts with.
type Founding struct {
	Info
	// Person is the first person's name; the first is a manager.
	Person     string
	Passphrase string
}

// Create makes a new branch in a folder, which it makes too where needed, and
// opens it. The file appears only once it is whole. Beyond Open's, the codes
// are branch_exists and bad_founding.
func Create(ctx context.Context, dir string, f Founding, o Options) (*Branch, error) {
	if f.Name == "" || len(f.Desk) != 1 || f.Desk[0] < 'A' || f.Desk[0] > 'Z' || foldName(f.Person) == "" || f.Passphrase == "" {
		return nil, refuse("bad_founding")
	}
	dir, path, err := locate(dir)
	if err != nil {
		return nil, err
	}
	if err := os.MkdirAll(dir, 0o700); err != nil {
		return nil, fault(path, err)
	}
	lock, err := lockFolder(dir, true)
	if err != nil {
		return nil, fault(path, err)
	}
	b, err := create(ctx, dir, path, lock, f, o)
	if err != nil {
		lock.undo()
		return nil, fault(path, err)
	}
	return b, nil
}

func create(ctx context.Context, dir, path string, lock *folderLock, f Founding, o Options) (*Branch, error) {
	if _, err := os.Lstat(path); err == nil {
		return nil, refuse("branch_exists", "file", path)
	}
	// Made under another name: whoever pulls the plug finds no half a branch,
	// and the next try begins anew.
	part := path + ".part"
	remove := func() {
		for _, end := range []string{"", "-wal", "-shm"} {
			os.Remove(part + end)
		}
	}
	remove()
	defer remove()
	file, err := os.OpenFile(part, os.O_CREATE|os.O_EXCL|os.O_WRONLY, 0o600)
	if err != nil {
		return nil, err
	}
	if err := file.Close(); err != nil {
		return nil, err
	}
	if err := migrate(ctx, part); err != nil {
		return nil, err
	}
	if err := found(ctx, part, f, o); err != nil {
		return nil, err
	}
	if err := os.Rename(part, path); err != nil {
		return nil, err
	}
	if err := syncFolder(dir); err != nil {
		return nil, err
	}
	return open(ctx, path, lock, o)
}

// found writes the first entry, with the branch and its first person, who
// signs it: a chain vouches for all keys but the first.
func found(ctx context.Context, path string, f Founding, o Options) error {
	db, err := connect(ctx, path, o.pragmas)
	if err != nil {
		return err
	}
	defer db.Close()
	tx, err := db.BeginTx(ctx, nil)
	if err != nil {
		return err
	}
	defer tx.Rollback()

	const first = 1
	keys := vault.Keys{Data: vault.NewDataKey(), Signing: vault.NewSigningKey()}
	p := person{id: first, entry: first, name: f.Person, role: duty.Manager, publicKey: keys.Signing.Public()}
	w := &writing{Tx: tx, ctx: ctx, desk: f.Desk, person: first, key: keys.Signing}
	now := time.Now
	if o.Clock != nil {
		now = o.Clock
	}
	facts := p.facts()
	facts["branch"], facts["desk"], facts["practice"] = f.Name, f.Desk, strconv.FormatBool(f.Practice)
	err = w.enter(now(), duty.SetUp, facts,
		plainCommit("branch", first, f.Info.text()), plainCommit("people", first, p.text()))
	if err != nil {
		return err
	}
	if err := w.insert("branch", first, f.Name, f.Desk, f.Practice); err != nil {
		return err
	}
	locked := keys.Lock(f.Passphrase, p.owner())
	if err := w.insert("people", p.id, p.entry, p.name, string(p.role), []byte(p.publicKey), locked); err != nil {
		return err
	}
	if err := tx.Commit(); err != nil {
		return err
	}
	return db.Close()
}
