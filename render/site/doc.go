// Package site publishes a set of files to a folder, all or nothing: a reader
// of the folder finds the old site or the new one, whole, also when the
// program is killed on the way.
//
//	stage, err := site.Begin(target)
//	if err != nil { ... }
//	defer stage.Abandon()
//	err = stage.Write("index.html", page) // any number, from any goroutine
//	report, err := stage.Commit()
//
// # How
//
// Each file is compared, byte by byte, with the one that stands in the target.
// What differs is written to a hidden folder beside the target; what is the
// same is linked there on Commit, with its inode and its time of change, or
// copied with the same time where the file system refuses links. Then the two
// folders are exchanged in one operation and the old one is removed. When every
// file is the same and none is left over, no folder is made and nothing is
// touched.
//
// Beside a target named published these names are used, and none is left
// behind by a publish that ends:
//
//	.published.saddlebook-lock    held while a publish is at work
//	.published.saddlebook-stage   the site to come; after the exchange, the one to remove
//	.published.saddlebook-old     only without exchange: the site to return to
//
// What a killed publish leaves is cleared by the next Begin.
//
// # Where folders cannot be exchanged
//
// Linux exchanges two folders at once on most of its file systems. Elsewhere
// two renames do it: the old site steps aside, the new one takes its place.
// Between the two there is no folder at the target, for a moment. A process
// killed in that moment leaves the gap open until the next Begin, which finds
// the -old folder, whole, and puts it back.
//
// # Power cuts
//
// The list of files is always forced to disk before the new site takes its
// place, and on Linux all of a site that replaces another. Elsewhere, and for
// the first site at a target, which has nothing to lose, the pages are left to
// the system: a power cut within seconds of a publish may leave damaged ones.
// The next publish compares bytes and so mends them.
//
// # What is refused
//
// The site carries its own list of files, ListName. Anything in the target
// that is neither listed nor a folder of a listed file was not written by this
// program, and the target is refused, before the work and once more before the
// exchange. So are links and special files inside it. A listed file that was
// changed or deleted by hand is one the program wrote: it gets the right bytes
// again. A target that is itself a link to a folder is followed.
//
// Folders and replaced files keep their permission bits. Owners and access
// lists are those that new files get. A process whose current folder is the
// target goes on seeing the old, removed one until it enters the target again.
//
// # Errors
//
// Refusals match ErrRefused and say what to do; a target in use also matches
// ErrBusy. Every other error is the machine's and names the path.
package site
