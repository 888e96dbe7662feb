//go:build !unix

package sim

import "time"

var began = time.Now()

// spent is the time since the start, where there is no processor time to ask
// for.
func spent() time.Duration { return time.Since(began) }
