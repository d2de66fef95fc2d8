package desk

import (
	"os"
	"path/filepath"
	"runtime"
	"slices"
	"strings"

	"weighhouse/app/words"
)

// A spot is a folder or a workbook that may be taken.
type spot struct{ label, path string }

// spotsIn lists the workbooks in a folder, newest first, then its folders,
// the one above, and the sticks and disks that are in the machine.
func spotsIn(folder string, r *words.Reader) []spot {
	var files, folders []spot
	entries, _ := os.ReadDir(folder)
	type dated struct {
		spot
		at int64
	}
	var found []dated
	for _, e := range entries {
		name := e.Name()
		path := filepath.Join(folder, name)
		switch {
		case strings.HasPrefix(name, ".") || strings.HasPrefix(name, "~$"):
		case e.IsDir():
			folders = append(folders, spot{r.T("scorecards.folder", "name", name), path})
		case strings.EqualFold(filepath.Ext(name), ".xlsx"):
			at := int64(0)
			if info, err := e.Info(); err == nil {
				at = info.ModTime().UnixNano()
			}
			found = append(found, dated{spot{name, path}, at})
		}
	}
	slices.SortStableFunc(found, func(a, b dated) int { return int(min(max(b.at-a.at, -1), 1)) })
	for _, f := range found {
		files = append(files, f.spot)
	}
	list := append(files, folders...)
	if up := filepath.Dir(folder); up != folder {
		list = append(list, spot{r.T("scorecards.above", "name", up), up})
	}
	for _, path := range removable() {
		list = append(list, spot{r.T("scorecards.stick", "name", path), path})
	}
	return list
}

// removable are the folders at which sticks and further disks stand.
func removable() []string {
	var list []string
	if runtime.GOOS == "windows" {
		for c := 'D'; c <= 'Z'; c++ {
			if path := string(c) + `:\`; exists(path) {
				list = append(list, path)
			}
		}
		return list
	}
	for _, pattern := range []string{"/media/*", "/media/*/*", "/run/media/*/*", "/mnt/*", "/Volumes/*"} {
		found, _ := filepath.Glob(pattern)
		for _, path := range found {
			if exists(path) {
				list = append(list, path)
			}
		}
	}
	return list
}

func exists(path string) bool {
	info, err := os.Stat(path)
	return err == nil && info.IsDir()
}
