package store

// WriteFile puts content at path, whole or not at all, as Save does. The error
// is a *Fault.
func WriteFile(path string, content []byte) error { return replace(computer{}, path, content) }
