#!/usr/bin/env python3
"""Times every refusal against `--version`, whole processes: standard library and cargo only.

    python3 tests/bench/refusals.py            builds the release program first

Every file of `tests/broken`, and files near 1 MiB that are wrong in as many ways as were found slow. Each is to take
under 0.1 s, and to say what is wrong; exit 1 where one does not. The least of a few runs counts: a busy machine only
ever adds to it.
"""
import os, pathlib, subprocess, sys, tempfile, time

ROOT = pathlib.Path(__file__).resolve().parents[2]
PROGRAM = pathlib.Path(os.environ.get('CARGO_TARGET_DIR', ROOT / 'target')) / 'release' / 'ampledger'
MOST, ROUNDS, BYTES = 0.1, 7, 1 << 20
GOOD = '''build: mower
air: 20 °C
engine: {speeds: {idle: 1800 rpm, governed: 3400 rpm}}
charging:
  - winding: {open_circuit: 28 V at 3600 rpm, resistance: 0.14 ohm, inductance: 0.4 mH, poles: 12}
    rectifier: full-wave
battery: {capacity: 30 Ah, cold_cranking: 300 A, type: flooded}
shift: [{governed: 2 h}]
'''


def large():
    """Name of each large file, what is said of it, and its text, up to 1 MiB and 60,000 values; all are refused."""
    fill = lambda line: line * ((BYTES - len(GOOD.encode()) - 2000) // len(line.encode()))
    numbered = lambda form, n: ''.join(form.format(k) for k in range(n))
    bomb = 'a0: &a0 [x,x,x,x,x,x,x,x]\n' + ''.join(
        f'a{n}: &a{n} [{",".join([f"*a{n - 1}"] * 8)}]\n' for n in range(1, 40))
    return {
        'over 1 MiB': ('too large', '#' * (BYTES + 1)),
        'only remarks': ('is empty', '# remark\n' * (BYTES // 9)),
        'one long line': ('expect ":"', GOOD + 'x' * (BYTES - len(GOOD.encode()) - 10)),
        'unknown keys': ('unknown key `key0`', GOOD + numbered('key{}: 1\n', 29_000)),
        'one key many times': ('`air` is given twice', GOOD + 'air: 1\n' * 49_000),
        'accessories of nothing': ('more than 60000 values', GOOD + 'accessories:\n' + fill('- {}\n')),
        'accessories, wrong units': ('wrong unit: `mm`', GOOD + 'accessories:\n' + numbered('- {{name: a{}, draw: 3 mm}}\n', 11_500)),
        'accessories, one name': ('the name `a` is given twice', GOOD + 'accessories:\n' + '- {name: a, draw: 3 A}\n' * 11_500),
        'accessories, unknown parts': ('no part `lamp0`', GOOD + 'accessories:\n' + numbered('- {{part: lamp{}}}\n', 19_500)),
        'accessories, unknown keys': ('unknown key `nom0`', GOOD + 'accessories:\n' + numbered('- {{nom{}: 1}}\n', 19_500)),
        'accessories, unknown states': ('no state `work`', GOOD + 'accessories:\n' + numbered('- {{name: a{}, draw: 1 A, duty: {{work: 1 %}}}}\n', 6_500)),
        'accessories, unknown company': ('no accessory is called `b0`', GOOD + 'accessories:\n' + numbered('- {{name: a{0}, draw: 1 A, apart: b{0}}}\n', 8_000)),
        'one wrong of many accessories': ('wrong unit: `mm`', GOOD + 'accessories:\n' + numbered('- {{name: a{}, draw: 1 A}}\n', 11_500) + '- {name: last, draw: 3 mm}\n'),
        'steps, unknown states': ('no state `gov`', GOOD.replace('{governed: 2 h}', ', '.join('{gov: 1 h}' for _ in range(19_500)))),
        'plain numbers': ('a single value where a mapping', GOOD + 'accessories: [' + '1,' * 59_000 + '1]\n'),
        'brackets': ('nested deeper than 64', '[' * (BYTES - 1)),
        'braces': ('nested deeper than 64', '{a: ' * (BYTES // 4 - 1)),
        'dashes': ('nested deeper than 64', '- ' * (BYTES // 2 - 1)),
        'tabs': ('tab used for indentation', 'a:\n' + '\t- b\n' * (BYTES // 5 - 1)),
        'quotes': ('invalid indentation', 'a: "' + 'x\n' * (BYTES // 2 - 10)),
        'two documents': ('a second document', GOOD + '---\n' + fill('a: 1\n')),
        'merge keys': ('merge key `<<`', GOOD + fill('<<: x\n')),
        'tags': ('a tag is not understood', GOOD + 'accessories:\n' + '- !t x\n' * 59_000),
        'anchors': ('more than 1000 anchors', GOOD + numbered('k{0}: &a{0} x\n', 29_000)),
        'alias bomb': ('more than 60000 values', bomb),
        'too many values': ('more than 60000 values', GOOD + 'accessories: [' + '1,' * 400_000 + '1]\n'),
        'unclosed bracket': ('more than 60000 values', GOOD + 'accessories: [' + fill('{name: a, draw: 1 A},\n')),
    }


def took(args):
    begun = time.perf_counter()
    code = subprocess.run([PROGRAM, *args], stdout=subprocess.DEVNULL, stderr=subprocess.DEVNULL).returncode
    return time.perf_counter() - begun, code


def said(args):
    return subprocess.run([PROGRAM, *args], capture_output=True).stderr.decode()


def main():
    if '--no-build' not in sys.argv:
        subprocess.run(['cargo', 'build', '--release', '-q', '--locked'], cwd=ROOT, check=True)
    missed = 0
    with tempfile.TemporaryDirectory() as folder:
        calls = {}
        for path in sorted((ROOT / 'tests/broken').glob('*.yaml')):
            sets = path.with_suffix('.set')
            values = sets.read_text().splitlines() if sets.exists() else []
            own = path.with_suffix('.catalogs')
            calls[path.stem] = ['check', path, *[f'--set={v}' for v in values], *(['--catalogs', own] if own.exists() else [])]
        calls |= {'missing file': ['check', folder + '/none.yaml'], 'folder for a file': ['check', folder], 'no command': []}
        says = {'no command': 'Usage'}
        for name, (what, text) in large().items():
            path = pathlib.Path(folder, name.replace(' ', '-') + '.yaml')
            path.write_text(text)
            calls[f'1 MiB: {name}'] = ['check', path]
            says[f'1 MiB: {name}'] = what
        base = min(took(['--version'])[0] for _ in range(5 * ROUNDS))
        print(f"        {'--version':42} {base * 1e3:7.1f} ms")
        slowest = 0.0
        for name, args in calls.items():
            runs = [took(args) for _ in range(ROUNDS)]
            one, codes = min(r[0] for r in runs), {r[1] for r in runs}
            holds = one < MOST and codes == {2} and says.get(name, 'error: ') in said(args)
            missed += not holds
            slowest = max(slowest, one)
            if not holds or name.startswith('1 MiB'):
                print(f"{'holds ' if holds else 'MISSED'}  {name:42} {one * 1e3:7.1f} ms {one / base:7.1f} ×  exit {codes}", flush=True)
    print(f'{len(calls)} refusals, the slowest {slowest * 1e3:.1f} ms, {slowest / base:.1f} × --version; {missed} at {MOST} s or more')
    return bool(missed)


if __name__ == '__main__':
    sys.exit(main())
