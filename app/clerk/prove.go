package main

import (
	"context"
	"fmt"

	"weighhouse/app/practice"
)

// prove scores every kept result again and walks the journal, without -branch
// of the practice branch that the window opens.
func (k *clerk) prove() error {
	dir := k.option["branch"]
	if dir == "" {
		var err error
		if dir, err = practice.Folder(); err != nil {
			return err
		}
	}
	s, err := k.signIn(dir)
	if err != nil {
		return err
	}
	defer s.Branch().Close()
	bar := k.progress()
	proof, err := s.Prove(context.Background(), func(done, total int64) {
		bar.tell("clerk.progress_prove", "n", int(done), "all", int(total))
	})
	bar.end()
	if err != nil {
		return err
	}
	for _, p := range proof.Problems {
		fmt.Fprintln(k.out, k.words.Problem(p))
	}
	if len(proof.Problems) > 0 {
		return errRefused
	}
	fmt.Fprintln(k.out, k.words.T("clerk.proved", "n", int(proof.Results), "entries", int(proof.Entries)))
	return nil
}
