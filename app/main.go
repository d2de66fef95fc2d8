// Weighhouse opens the window of one desk: flags, the folder its file is kept
// in, and the window itself. All else is in app/desk.
package main

import (
	"flag"
	"fmt"
	"os"
	"time"

	"fyne.io/fyne/v2/app"

	"weighhouse/app/desk"
)

func main() {
	var options desk.Options
	flag.BoolVar(&options.Practice, "practice", false, "open the practice branch, in which everyone is invented")
	flag.StringVar(&options.Folder, "folder", "", "the folder of this desk's file (default: a folder of your own)")
	flag.StringVar(&options.Language, "language", "", "en, fr or es (default: as last time)")
	flag.Parse()
	if flag.NArg() > 0 {
		fmt.Fprintln(os.Stderr, "weighhouse: unexpected:", flag.Args())
		flag.Usage()
		os.Exit(2)
	}
	// Graphics that hang would leave a process that nobody sees.
	watch := time.AfterFunc(10*time.Second, func() {
		fmt.Fprintln(os.Stderr, "weighhouse:", desk.NotDrawn(options))
		os.Exit(1)
	})
	if err := desk.Run(app.NewWithID("weighhouse.desk"), options, func() { watch.Stop() }); err != nil {
		fmt.Fprintln(os.Stderr, "weighhouse:", err)
		os.Exit(1)
	}
}
