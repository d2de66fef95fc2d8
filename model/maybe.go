package model

import "encoding"

// Maybe is a value that may be left out; the zero Maybe is left out.
type Maybe[T any] struct {
	Value T
	Set   bool
}

// Some is a Maybe that holds v.
func Some[T any](v T) Maybe[T] { return Maybe[T]{v, true} }

// Or is the value, or other when it is left out.
func (m Maybe[T]) Or(other T) T {
	if m.Set {
		return m.Value
	}
	return other
}

// MarshalText is empty for a value left out.
func (m Maybe[T]) MarshalText() ([]byte, error) {
	if !m.Set {
		return nil, nil
	}
	return any(m.Value).(encoding.TextMarshaler).MarshalText()
}

// UnmarshalText takes empty text for a value left out.
func (m *Maybe[T]) UnmarshalText(b []byte) error {
	*m = Maybe[T]{}
	if len(b) == 0 {
		return nil
	}
	if err := any(&m.Value).(encoding.TextUnmarshaler).UnmarshalText(b); err != nil {
		return err
	}
	m.Set = true
	return nil
}
