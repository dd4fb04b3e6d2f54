package cluster

const diesWithParent = true

func leaveServer() { deathSignal = 0 }
