package player

import "sync"

// mailbox holds the newest frame and nothing else: a reader that is slow
// misses frames and never holds up the writer.
type mailbox struct {
	mu    sync.Mutex
	frame *Frame
	ready chan struct{} // holds one token while there is a frame to read
}

func newMailbox() *mailbox { return &mailbox{ready: make(chan struct{}, 1)} }

// post replaces the frame that waits, if any.
func (m *mailbox) post(f *Frame) {
	m.mu.Lock()
	m.frame = f
	m.mu.Unlock()
	select {
	case m.ready <- struct{}{}:
	default:
	}
}

// take returns the newest frame, once.
func (m *mailbox) take() *Frame {
	m.mu.Lock()
	defer m.mu.Unlock()
	f := m.frame
	m.frame = nil
	return f
}
