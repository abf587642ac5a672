package main

import (
	"errors"
	"fmt"
	"io/fs"
	"os"
	"path/filepath"
	"runtime"
	"slices"
	"strconv"
	"strings"

	"github.com/spf13/cobra"
	"github.com/spf13/viper"

	"shadeledger/scenarios"
	"shadeledger/scenarios/report"
)

// settings say how a command runs; plans are never read through them.
type settings struct {
	format    report.Format
	units     *scenarios.Units // nil: the plan's own
	workers   int
	quiet     bool
	strict    bool
	output    string
	overwrite bool
	set       []string
}

// settingKeys are the settings that the environment and the settings file may give, with their defaults.
var settingKeys = map[string]string{"format": "table", "units": "", "workers": "0", "quiet": "false", "strict": "false"}

// addOutputFlags adds the flags of every command that prints a result; its units too where they are the reader's choice.
func addOutputFlags(cmd *cobra.Command) {
	f := cmd.Flags()
	f.String("format", "table", "table, csv or json; csv and json are always metric")
	f.String("output", "", "write the result to this new file instead of standard output")
	f.Bool("overwrite", false, "let --output replace a file")
	f.Bool("quiet", false, "no progress; cautions still print")
	complete(cmd, "format", "table", "csv", "json")
}

// addPlanFlags adds the flags of every command that reads a plan.
func addPlanFlags(cmd *cobra.Command) {
	addOutputFlags(cmd)
	f := cmd.Flags()
	f.String("units", "", "metric or us, of tables (default: the plan's)")
	complete(cmd, "units", "metric", "us")
	f.StringArray("set", nil, "KEY=VALUE over a plan key, for instance 'treatments.No action.matrix.lai=4'; may be repeated")
	f.Int("workers", 0, "goroutines; 0 is one for each processor. Results do not depend on it")
	f.Bool("strict", false, "exit with 3 where there are warnings")
	_ = cmd.RegisterFlagCompletionFunc("set", completeKeys)
}

func complete(cmd *cobra.Command, flag string, words ...string) {
	_ = cmd.RegisterFlagCompletionFunc(flag, cobra.FixedCompletions(words, cobra.ShellCompDirectiveNoFileComp))
}

// readSettings puts flag, environment, settings file and default together.
func readSettings(cmd *cobra.Command) (*settings, error) {
	v, err := newViper(cmd)
	if err != nil {
		return nil, err
	}
	s := &settings{}
	if s.format, err = report.ParseFormat(v.GetString("format")); err != nil {
		return nil, usageError{err}
	}
	switch u := v.GetString("units"); u {
	case "":
	case "metric", "us":
		x := map[string]scenarios.Units{"metric": scenarios.Metric, "us": scenarios.US}[u]
		s.units = &x
	default:
		return nil, usagef("units %q are not known; they must be metric or us", u)
	}
	if s.workers, err = strconv.Atoi(v.GetString("workers")); err != nil || s.workers < 0 || s.workers > 1024 {
		return nil, usagef("workers is %q; it must be a whole number 0 to 1024", v.GetString("workers"))
	}
	if s.workers == 0 {
		s.workers = runtime.GOMAXPROCS(0)
	}
	for key, to := range map[string]*bool{"quiet": &s.quiet, "strict": &s.strict} {
		if *to, err = strconv.ParseBool(v.GetString(key)); err != nil {
			return nil, usagef("%s is %q; it must be true or false", key, v.GetString(key))
		}
	}
	f := cmd.Flags()
	if f.Lookup("output") != nil {
		s.output, _ = f.GetString("output")
		s.overwrite, _ = f.GetBool("overwrite")
	}
	if f.Lookup("set") != nil {
		s.set, _ = f.GetStringArray("set")
	}
	return s, s.figure(cmd)
}

// draws marks commands that draw a figure where --output names an SVG or PNG file.
const draws = "draws"

// unwritten are endings of pictures and documents, in which no command writes.
var unwritten = []string{".pdf", ".eps", ".ps", ".jpg", ".jpeg", ".gif", ".tif", ".tiff", ".bmp", ".webp", ".emf", ".wmf", ".doc", ".docx", ".xls", ".xlsx", ".ods", ".odt"}

// figure turns the format to that of a figure by the ending of --output, and refuses endings that would not say what is in the file.
func (s *settings) figure(cmd *cobra.Command) error {
	end := strings.ToLower(filepath.Ext(s.output))
	kind, picture := map[string]report.Format{".svg": report.SVG, ".png": report.PNG}[end]
	_, drawing := cmd.Annotations[draws]
	switch {
	case picture && !drawing:
		return usagef("--output %s: this command draws no figure; name a file for text", s.output)
	case picture && cmd.Flags().Changed("format"):
		return usagef("--output %s is a figure and --format a table: leave --format out, or name a file for text", s.output)
	case picture:
		s.format = kind
	case slices.Contains(unwritten, end) && drawing:
		return usagef("--output %s: figures are .svg or .png; tables go to any file for text", s.output)
	case slices.Contains(unwritten, end):
		return usagef("--output %s: this command writes tables; name a file for text", s.output)
	}
	return nil
}

func newViper(cmd *cobra.Command) (*viper.Viper, error) {
	v := viper.New()
	v.SetEnvPrefix("SHADELEDGER")
	for key, value := range settingKeys {
		v.SetDefault(key, value)
		if flag := cmd.Flags().Lookup(key); flag != nil {
			if err := v.BindPFlag(key, flag); err != nil {
				return nil, err
			}
		}
		if err := v.BindEnv(key); err != nil {
			return nil, err
		}
	}
	file := os.Getenv("SHADELEDGER_SETTINGS")
	named := file != ""
	if !named {
		dir, err := os.UserConfigDir()
		if err != nil {
			return v, nil // no configuration folder, no settings file
		}
		file = filepath.Join(dir, "shadeledger", "settings.yaml")
	}
	if _, err := os.Stat(file); errors.Is(err, fs.ErrNotExist) && !named {
		return v, nil
	}
	return v, readFile(v, file)
}

// readFile reads the settings file and refuses keys it does not know.
func readFile(v *viper.Viper, file string) error {
	w := viper.New()
	w.SetConfigFile(file)
	w.SetConfigType("yaml")
	if err := w.ReadInConfig(); err != nil {
		return usagef("settings file %s: %w", file, err)
	}
	for _, key := range w.AllKeys() {
		if _, ok := settingKeys[key]; !ok {
			return usagef("settings file %s: %q is not a setting; it must be one of format, quiet, strict, units, workers", file, key)
		}
	}
	return v.MergeConfigMap(w.AllSettings())
}

// outputUnits are the units of tables.
func (s *settings) outputUnits(p *scenarios.Plan) scenarios.Units {
	switch {
	case s.units != nil:
		return *s.units
	case p != nil:
		return p.Units
	}
	return scenarios.Metric
}

// progress tells on standard error what goes on.
func (s *settings) progress(io streams, format string, args ...any) {
	if !s.quiet {
		fmt.Fprintf(io.err, strings.TrimSuffix(format, "\n")+"\n", args...)
	}
}
