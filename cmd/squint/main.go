package main

import (
	"context"
	"os"
	"os/signal"
	"syscall"
)

func main() { live(machine()) }

// live is the program until its end, or until it is stopped.
func live(h host) {
	ctx, stop := signal.NotifyContext(context.Background(), os.Interrupt, syscall.SIGTERM)
	context.AfterFunc(ctx, stop) // a second Ctrl-C ends the program at once
	os.Exit(int(run(ctx, h, os.Args[1:])))
}
