package desk

import "sync"

// posted holds the changes that acts off the window's thread ask of the
// window, until the test lets them come.
type posted struct {
	sync.Mutex
	list []func()
}

func (p *posted) add(f func()) {
	p.Lock()
	defer p.Unlock()
	p.list = append(p.list, f)
}

// run lets them come, in their order, and tells that there were any.
func (p *posted) run() bool {
	p.Lock()
	list := p.list
	p.list = nil
	p.Unlock()
	for _, f := range list {
		f()
	}
	return len(list) > 0
}
