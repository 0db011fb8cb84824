package main

import (
	"context"
	"os"
	"os/signal"
	"sync/atomic"
	"syscall"
)

// interruption ends its context at the first SIGINT or SIGTERM; the second
// then does what it does to any program.
type interruption struct {
	context.Context
	code atomic.Int32
	stop context.CancelFunc
	got  chan os.Signal
}

// interruptible starts to listen.
func interruptible(ctx context.Context) *interruption {
	i := &interruption{got: make(chan os.Signal, 1)}
	i.code.Store(exitInterrupted)
	i.Context, i.stop = context.WithCancel(ctx)
	signal.Notify(i.got, os.Interrupt, syscall.SIGTERM)
	go i.wait()
	return i
}

func (i *interruption) wait() {
	select {
	case s := <-i.got:
		signal.Stop(i.got)
		if s == syscall.SIGTERM {
			i.code.Store(exitTerminated)
		}
		i.stop()
	case <-i.Done():
	}
}

// exitCode is the one for a run that was interrupted.
func (i *interruption) exitCode() int { return int(i.code.Load()) }

// end stops listening.
func (i *interruption) end() {
	signal.Stop(i.got)
	i.stop()
}
