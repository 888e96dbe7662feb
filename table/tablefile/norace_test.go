//go:build !race

package tablefile

// raced says that the race detector slows all access to memory.
const raced = false
