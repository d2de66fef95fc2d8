package main

import (
	"context"
	"fmt"
)

// prove scores every kept result again and walks the journal.
func (k *clerk) prove() error {
	s, err := k.signIn(k.option["branch"])
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
