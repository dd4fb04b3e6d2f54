//go:build !linux

package cluster

const diesWithParent = false

func leaveServer() {}
