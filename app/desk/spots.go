package desk

import (
	"os"
	"path/filepath"
	"runtime"
	"slices"
	"strings"
	"time"

	"weighhouse/app/words"
)

// A spot is a folder or a workbook that may be taken.
type spot struct{ label, path string }

// spotsIn lists the workbooks in a folder, newest first, then its folders,
// the one above, and the sticks and disks that are in the machine. The error
// is the folder's; the places to go on to are listed all the same.
func spotsIn(folder string, r *words.Reader) ([]spot, error) {
	entries, err := os.ReadDir(folder)
	var files, folders []spot
	changed := map[string]time.Time{}
	for _, e := range entries {
		name := e.Name()
		path := filepath.Join(folder, name)
		switch {
		case strings.HasPrefix(name, ".") || strings.HasPrefix(name, "~$"):
		case e.IsDir():
			folders = append(folders, spot{r.T("scorecards.folder", "name", name), path})
		case strings.EqualFold(filepath.Ext(name), ".xlsx"):
			files = append(files, spot{name, path})
			if info, err := e.Info(); err == nil {
				changed[path] = info.ModTime()
			}
		}
	}
	slices.SortStableFunc(files, func(a, b spot) int { return changed[b.path].Compare(changed[a.path]) })
	list := append(files, folders...)
	if up := filepath.Dir(folder); up != folder {
		list = append(list, spot{r.T("scorecards.above", "name", up), up})
	}
	for _, path := range removable() {
		list = append(list, spot{r.T("scorecards.stick", "name", path), path})
	}
	return list, err
}

// removable are the folders at which sticks and further disks stand.
func removable() []string {
	var list []string
	if runtime.GOOS == "windows" {
		for c := 'D'; c <= 'Z'; c++ {
			if path := string(c) + `:\`; isFolder(path) {
				list = append(list, path)
			}
		}
		return list
	}
	for _, pattern := range []string{"/media/*", "/media/*/*", "/run/media/*/*", "/mnt/*", "/Volumes/*"} {
		found, _ := filepath.Glob(pattern)
		for _, path := range found {
			if isFolder(path) {
				list = append(list, path)
			}
		}
	}
	return list
}

func isFolder(path string) bool {
	info, err := os.Stat(path)
	return err == nil && info.IsDir()
}
