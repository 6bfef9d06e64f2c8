// Package history asks git about a notebook. A notebook that is not kept in
// git, or a machine without git, is no error: there is just nothing to tell.
package history

import (
	"context"
	"os/exec"
	"strings"
)

// Revision is the state of a folder as git knows it.
type Revision struct {
	Commit string // full hash; "" if the folder is not kept in git
	Edited bool   // files in the folder differ from that commit
}

// String is the short hash and whether there are changes; "" without git.
func (r Revision) String() string {
	if r.Commit == "" {
		return ""
	}
	s := r.Commit[:min(12, len(r.Commit))]
	if r.Edited {
		s += " with changes that are not committed"
	}
	return s
}

// Of returns the revision of a folder. The published site within it does not
// count as a change.
func Of(ctx context.Context, folder, published string) Revision {
	commit, err := git(ctx, folder, "rev-parse", "--verify", "HEAD")
	if err != nil {
		return Revision{}
	}
	status, err := git(ctx, folder, "status", "--porcelain", "--untracked-files=normal", "--", ".", ":(exclude)"+published)
	return Revision{Commit: commit, Edited: err != nil || status != ""}
}

func git(ctx context.Context, folder string, args ...string) (string, error) {
	cmd := exec.CommandContext(ctx, "git", append([]string{"-C", folder}, args...)...)
	out, err := cmd.Output()
	return strings.TrimSpace(string(out)), err
}
