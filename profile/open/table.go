package open

import "bytes"

// IsTable reports whether a file that begins so is read as a table of layers
// in text, by package delimited.
func IsTable(beginning []byte) bool {
	_, other := sniff(beginning)
	return !other && !bytes.HasPrefix(beginning, []byte(zipped))
}
