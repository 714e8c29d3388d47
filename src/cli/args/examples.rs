//! Examples and notes under the help of each command.

/// Of the program.
pub const PROGRAM: &str = "\
Exit codes:
  0  it keeps up, or nothing was to be judged
  1  it does not keep up
  2  the input or the call is wrong, and nothing is written

Examples:
  ampledger new -o mower.yaml
  ampledger check mower.yaml
  ampledger check mower.yaml --set 'engine.speeds.idle=2100 rpm'
  ampledger check mower.yaml --with night-work --format html -o mower.html";

/// Of `check`.
pub const CHECK: &str = "\
Exit codes:
  0  every build keeps up
  1  one does not
  2  an input or the call is wrong, and nothing is written

Examples:
  ampledger check mower.yaml
  ampledger check mower.yaml --air '-15 °C' --start '80 %'
  ampledger check mower.yaml --with night-work
  ampledger check mower.yaml --set 'accessories[PTO clutch].duty.governed=40 %'
  ampledger check mower.yaml --why governed
  ampledger check builds/*.yaml --format csv -o builds.csv
  generate-build | ampledger check -";

/// Of `curve`.
pub const CURVE: &str = "\
Examples:
  ampledger curve mower.yaml
  ampledger curve mower.yaml --rpm 1800,2400,3600 --volts 12.6,14.4
  ampledger curve mower.yaml --format csv -o curve.csv --svg curve.svg";

/// Of `wire`.
pub const WIRE: &str = "\
Examples:
  ampledger wire mower.yaml
  ampledger wire mower.yaml --gauge awg";

/// Of `sheet`.
pub const SHEET: &str = "\
Examples:
  ampledger sheet mower.yaml -o mower.html
  ampledger sheet mower.yaml --for 'the orchard' --date '12 March' -o quote.html
  ampledger sheet mower.yaml --with night-work --prices prices.yaml -o quote.html";

/// Of `identify`.
pub const IDENTIFY: &str = "\
Examples:
  ampledger identify bench.csv
  ampledger identify bench.yaml --format json";

/// Of `fleet`.
pub const FLEET: &str = "\
Build files, kits and patterns are looked for beside the fleet file. A row that
cannot be judged says why and hides no other. CSV leaves row by row.

Exit codes:
  0  every machine keeps up
  1  one does not
  2  a row could not be judged (all others are told), or the call is wrong

Examples:
  ampledger fleet fleet.yaml
  ampledger fleet fleet.csv --kit none --kit night-work
  ampledger fleet fleet.csv --no-remedy --format csv -o verdicts.csv
  printf 'machine,build,count,kit\\nmower,mower.yaml,12,night-work\\n' | ampledger fleet -";
/// Of `size`.
pub const SIZE: &str = "\
Each amount is on the side that keeps up, and just beyond it does not.

Examples:
  ampledger size mower.yaml
  ampledger size mower.yaml --set 'accessories[0].count=4'
  ampledger size mower.yaml --odds '95 %'
  ampledger size mower.yaml --format json";

/// Of `remedy`.
pub const REMEDY: &str = "\
What may be changed stands under `may:` in the build; without it, all that the
catalogs allow. A price list names prices by part id:
  currency: EUR
  prices: {winding-20a: 199, charger: 45}

Examples:
  ampledger remedy mower.yaml
  ampledger remedy mower.yaml --with night-work --prices prices.yaml
  ampledger remedy mower.yaml --format json";

/// Of `odds`.
pub const ODDS: &str = "\
Tolerances stand in the build, `55 W ± 8 %`; a figure without one does not vary.

Examples:
  ampledger odds mower.yaml
  ampledger odds mower.yaml --with night-work
  ampledger odds mower.yaml --runs 20000 --seed 7 --format json
  ampledger odds mower.yaml --worst worst.yaml";

/// Of `new`.
pub const NEW: &str = "\
Asks nothing. An existing file is kept unless --force is given.

Examples:
  ampledger new -o mower.yaml
  ampledger new --kind alternator -o loader.yaml
  ampledger new --kind three-phase | ampledger check -";

/// Of `schema`.
pub const SCHEMA: &str = "\
An editor that knows JSON Schema completes the keys of a YAML file, shows what
each means and marks wrong units and words: save the schema, and name it in the
editor's settings for your build files. `ampledger check` checks more.

Examples:
  ampledger schema -o build.schema.json
  ampledger schema catalog -o catalog.schema.json";

/// Of `completions`.
pub const COMPLETIONS: &str = "\
Examples:
  ampledger completions bash > ~/.local/share/bash-completion/completions/ampledger
  ampledger completions zsh > ~/.zfunc/_ampledger
  ampledger completions fish > ~/.config/fish/completions/ampledger.fish
  ampledger completions powershell >> $PROFILE";

/// Of `man`.
pub const MAN: &str = "\
Examples:
  ampledger man | man -l -
  ampledger man check | man -l -
  ampledger man -o ampledger.1";

/// Of `parts`.
pub const PARTS: &str = "\
`part: ID` in a build takes a part, and any key written beside it takes the
place of its figure. `--with ID` of `check` takes a kit. Entries in a folder of
your own (--catalogs) come first.

Examples:
  ampledger parts
  ampledger parts led work
  ampledger parts work-light-led-27w
  ampledger parts --kind batteries --format csv
  ampledger parts --catalogs ~/parts seat heater";
