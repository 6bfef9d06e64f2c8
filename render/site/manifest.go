package site

import (
	"bytes"
	"crypto/sha256"
	"encoding/hex"
	"errors"
	"fmt"
	"path/filepath"
	"slices"
	"strings"
	"unicode"
	"unicode/utf8"
)

// ListName is the file in which a site names its files: one a line, the
// SHA-256 in hexadecimal, two spaces, the path; sorted by path. The list does
// not name itself.
const ListName = ".saddlebook-files"

type digest = [sha256.Size]byte

// formatList writes the list of the files given.
func formatList(files map[string]entry) []byte {
	paths := make([]string, 0, len(files))
	size := 0
	for p := range files {
		paths = append(paths, p)
		size += 2*sha256.Size + 2 + len(p) + 1
	}
	slices.Sort(paths)
	out := make([]byte, 0, size)
	for _, p := range paths {
		sum := files[p].sum
		out = hex.AppendEncode(out, sum[:])
		out = append(out, "  "...)
		out = append(out, p...)
		out = append(out, '\n')
	}
	return out
}

// parseList reads a list back. Line ends may have become CRLF on the way
// through version control.
func parseList(data []byte) (map[string]digest, error) {
	listed := map[string]digest{}
	for i, line := range bytes.Split(data, []byte("\n")) {
		line = bytes.TrimSuffix(line, []byte("\r"))
		if len(line) == 0 {
			continue
		}
		sum, path, ok := strings.Cut(string(line), "  ")
		var d digest
		if !ok || len(sum) != 2*len(d) {
			return nil, fmt.Errorf("line %d is not a SHA-256 and a path: %q", i+1, clip(line))
		}
		if _, err := hex.Decode(d[:], []byte(sum)); err != nil {
			return nil, fmt.Errorf("line %d does not begin with a SHA-256: %q", i+1, clip(line))
		}
		if why := badPath(path); why != "" {
			return nil, fmt.Errorf("line %d: the path %q %s", i+1, path, why)
		}
		if _, twice := listed[path]; twice {
			return nil, fmt.Errorf("line %d: the path %q stands there twice", i+1, path)
		}
		listed[path] = d
	}
	return listed, nil
}

func clip(line []byte) string {
	const most = 90
	if len(line) > most {
		return strings.ToValidUTF8(string(line[:most]), "") + "..."
	}
	return string(line)
}

// badPath says why a path cannot be one of a site, or "".
func badPath(p string) string {
	switch {
	case p == "":
		return "is empty"
	case !utf8.ValidString(p):
		return "is not UTF-8"
	case strings.HasPrefix(p, "/"):
		return "is absolute"
	case strings.Contains(p, `\`):
		return "holds a backslash"
	case strings.ContainsFunc(p, unicode.IsControl):
		return "holds a control character"
	case strings.EqualFold(p, ListName), strings.HasPrefix(strings.ToLower(p), ListName+"/"):
		return "is reserved for the list of files"
	}
	for part := range strings.SplitSeq(p, "/") {
		switch part {
		case "":
			return "has an empty part"
		case ".", "..":
			return fmt.Sprintf("has the part %q", part)
		}
	}
	if !filepath.IsLocal(filepath.FromSlash(p)) {
		return "is not a name this system allows"
	}
	return ""
}

func checkPath(p string) error {
	if why := badPath(p); why != "" {
		return &refusal{what: fmt.Sprintf("%q", p), why: "the path " + why,
			fix: "write a relative path with slashes, such as \"notes/addition.html\"", cause: errPath}
	}
	return nil
}

var errPath = errors.New("not a path of a site")
