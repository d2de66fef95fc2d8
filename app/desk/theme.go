package desk

import (
	"image/color"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/theme"

	"weighhouse/model"
)

// Colours of our own. Approve, refer and decline are dark and light shades of
// bluish green, orange and vermillion, which the colour-blind can tell apart
// (M. Okabe and K. Ito, Color Universal Design, 2008); each has a shape and a
// word as well.
const (
	colorApprove fyne.ThemeColorName = "approve"
	colorRefer   fyne.ThemeColorName = "refer"
	colorDecline fyne.ThemeColorName = "decline"
	colorBand    fyne.ThemeColorName = "band"    // behind every other score band
	colorNotice  fyne.ThemeColorName = "notice"  // behind the practice banner and warnings
	colorQuiet   fyne.ThemeColorName = "quiet"   // text of lesser weight
	colorStep    fyne.ThemeColorName = "step"    // what moves the balance
	colorRaised  fyne.ThemeColorName = "raised"  // behind a panel
	colorCurrent fyne.ThemeColorName = "current" // behind the question being answered
)

// look is the program's theme: paper and ink, or the same by lamplight.
type look struct{ dark bool }

type shades struct{ light, dark color.NRGBA }

func hex(rgb uint32) color.NRGBA {
	return color.NRGBA{R: uint8(rgb >> 16), G: uint8(rgb >> 8), B: uint8(rgb), A: 0xff}
}

var palette = map[fyne.ThemeColorName]shades{
	theme.ColorNameBackground:          {hex(0xf7f5f0), hex(0x1c1f22)},
	theme.ColorNameForeground:          {hex(0x1d2329), hex(0xe9e6df)},
	theme.ColorNameInputBackground:     {hex(0xffffff), hex(0x282c30)},
	theme.ColorNameInputBorder:         {hex(0x8a8578), hex(0x7d8288)},
	theme.ColorNameButton:              {hex(0xe8e3d6), hex(0x33383d)},
	theme.ColorNameDisabledButton:      {hex(0xefece4), hex(0x282c30)},
	theme.ColorNameDisabled:            {hex(0x625e55), hex(0xa8aeb4)},
	theme.ColorNamePlaceHolder:         {hex(0x625e55), hex(0xa8aeb4)},
	theme.ColorNamePrimary:             {hex(0x005a8d), hex(0x7cc4ee)},
	theme.ColorNameForegroundOnPrimary: {hex(0xffffff), hex(0x10202b)},
	theme.ColorNameFocus:               {hex(0xbfdcee), hex(0x2b5672)},
	theme.ColorNameSelection:           {hex(0xbfdcee), hex(0x2b5672)},
	theme.ColorNameHover:               {hex(0xe3ded0), hex(0x3a4046)},
	theme.ColorNamePressed:             {hex(0xd5cfbe), hex(0x464d54)},
	theme.ColorNameSeparator:           {hex(0xd8d2c4), hex(0x3d4349)},
	theme.ColorNameScrollBar:           {hex(0x8a8578), hex(0x7d8288)},
	theme.ColorNameScrollBarBackground: {hex(0xefece4), hex(0x24282b)},
	theme.ColorNameOverlayBackground:   {hex(0xfdfcf9), hex(0x24282b)},
	theme.ColorNameMenuBackground:      {hex(0xfdfcf9), hex(0x24282b)},
	theme.ColorNameHeaderBackground:    {hex(0xefece4), hex(0x24282b)},
	theme.ColorNameShadow:              {color.NRGBA{A: 0x30}, color.NRGBA{A: 0x80}},
	theme.ColorNameHyperlink:           {hex(0x005a8d), hex(0x7cc4ee)},
	theme.ColorNameError:               {hex(0x9c3700), hex(0xffa06e)},
	theme.ColorNameWarning:             {hex(0x6f4d00), hex(0xf3c05a)},
	theme.ColorNameSuccess:             {hex(0x005f47), hex(0x5bd6b0)},
	colorApprove:                       {hex(0x005f47), hex(0x5bd6b0)},
	colorRefer:                         {hex(0x6f4d00), hex(0xf3c05a)},
	colorDecline:                       {hex(0x9c3700), hex(0xffa06e)},
	colorBand:                          {hex(0xece7da), hex(0x262b2f)},
	colorNotice:                        {hex(0xfbeecb), hex(0x453a1c)},
	colorQuiet:                         {hex(0x57534a), hex(0xb3b8bd)},
	colorStep:                          {hex(0x3c4a57), hex(0xc9d3dc)},
	colorRaised:                        {hex(0xfdfcf9), hex(0x23272a)},
	colorCurrent:                       {hex(0xe6eef3), hex(0x26333c)},
}

// Color is the theme's own choice of dark or light: an officer sets it in the
// window, whatever the machine prefers.
func (l look) Color(name fyne.ThemeColorName, _ fyne.ThemeVariant) color.Color {
	s, ok := palette[name]
	if !ok {
		return theme.DefaultTheme().Color(name, l.variant())
	}
	if l.dark {
		return s.dark
	}
	return s.light
}

func (l look) variant() fyne.ThemeVariant {
	if l.dark {
		return theme.VariantDark
	}
	return theme.VariantLight
}

// Font is the library's: it draws Latin, Greek and Cyrillic.
func (l look) Font(style fyne.TextStyle) fyne.Resource { return theme.DefaultTheme().Font(style) }

// Icon is the library's.
func (l look) Icon(name fyne.ThemeIconName) fyne.Resource { return theme.DefaultTheme().Icon(name) }

// Size is close-set, for small screens.
func (l look) Size(name fyne.ThemeSizeName) float32 {
	switch name {
	case theme.SizeNameText:
		return 14
	case theme.SizeNameCaptionText:
		return 12
	case theme.SizeNameSubHeadingText:
		return 17
	case theme.SizeNameHeadingText:
		return 21
	case theme.SizeNamePadding:
		return 4
	case theme.SizeNameInnerPadding:
		return 6
	case theme.SizeNameLineSpacing:
		return 3
	case theme.SizeNameInputRadius, theme.SizeNameSelectionRadius:
		return 3
	case theme.SizeNameScrollBar:
		return 10
	case theme.SizeNameScrollBarSmall:
		return 6
	}
	return theme.DefaultTheme().Size(name)
}

// shade is a colour of the theme now set.
func shade(name fyne.ThemeColorName) color.Color {
	settings := fyne.CurrentApp().Settings()
	return settings.Theme().Color(name, settings.ThemeVariant())
}

// shadeOf is a recommendation's colour.
func shadeOf(r model.Recommendation) fyne.ThemeColorName {
	switch r {
	case model.Approve:
		return colorApprove
	case model.Refer:
		return colorRefer
	}
	return colorDecline
}
