//go:build unix

package batch

import (
	"os"
	"os/signal"
	"syscall"
)

// limitVariable lets files grow to 3 MiB and no further.
const limitVariable = "SHEARBOOK_TEST_LIMIT"

func limitFiles() {
	if os.Getenv(limitVariable) == "" {
		return
	}
	signal.Ignore(syscall.SIGXFSZ)
	limit := syscall.Rlimit{Cur: 3 << 20, Max: 3 << 20}
	if err := syscall.Setrlimit(syscall.RLIMIT_FSIZE, &limit); err != nil {
		panic(err)
	}
}
