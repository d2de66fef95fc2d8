package store

import "context"

// The practice branch's only person, and their passphrase, which is no
// secret: all that the practice branch holds is invented.
const (
	practicePerson     = "Tamsin Oake"
	practicePassphrase = "practice"
)

// CreatePractice makes a practice branch in a folder and opens it.
func CreatePractice(ctx context.Context, dir string, o Options) (*Branch, error) {
	return Create(ctx, dir, Founding{
		Info:       Info{Name: "Sedgebrook", Desk: "A", Practice: true},
		Person:     practicePerson,
		Passphrase: practicePassphrase,
	}, o)
}

// SignInPractice signs the invented person in to a practice branch; to any
// other it is "not_practice".
func (b *Branch) SignInPractice(ctx context.Context) (*Session, error) {
	if !b.info.Practice {
		return nil, refuse("not_practice")
	}
	return b.SignIn(ctx, practicePerson, practicePassphrase)
}
