#!/usr/bin/env python3
"""Seeds each target's corpus from the project's own files and fuzzes it for a while; prints the executions.

    tests/fuzz/run.py                     every target, a minute each
    tests/fuzz/run.py --seconds 900 chain one target, a quarter of an hour

Needs cargo-fuzz and a nightly compiler. What fails is left under tests/fuzz/artifacts; exit 1 then.
Without a sanitizer: the program has no unsafe code, and runs several times as fast.
"""
import argparse, pathlib, re, shutil, struct, subprocess, sys, tempfile

HERE = pathlib.Path(__file__).resolve().parent
ROOT = HERE.parents[1]
# longest input, bytes
TARGETS = {'build_file': 4096, 'catalog': 4096, 'chain': 65, 'readings': 1024, 'fleet_csv': 1024}
BUILD = ['-s', 'none', '--fuzz-dir', str(HERE)]


def seeds(target):
    """Name and bytes of each seed."""
    yaml = lambda folder: [(p.stem, p.read_bytes()) for p in sorted((ROOT / folder).glob('*.yaml'))]
    if target == 'build_file':
        pieces = [(p.stem, p.read_bytes()) for p in sorted((ROOT / 'src/starter_build').glob('*.yaml'))]
        return yaml('examples') + yaml('tests/broken') + yaml('tests/reading') + pieces
    if target == 'catalog':
        cut = []
        for name, text in yaml('catalogs'):
            head, *entries = re.split(rb'(?m)^(?=  - id:)', text)
            top = head[head.rindex(b'\n', 0, len(head) - 1) + 1:]
            cut += [(f'{name}-{i}', top + b''.join(entries[i:i + 4])) for i in range(0, len(entries), 4)]
        return cut
    if target == 'chain':
        count = len(list((ROOT / 'examples').glob('*.yaml')))
        return [(f'{i}-{how}', bytes([i]) + struct.pack('>BHB', 0, 3 * i + how, how)) for i in range(count) for how in range(20)]
    tables = [(p.stem, p.read_bytes()) for p in sorted((ROOT / 'tests').rglob('*.csv')) if 'fuzz' not in p.parts]
    own = {'readings': b'# winding:\n#   poles: 12\n#   resistance: 0.2 ohm\n# rectifier: full-wave\nrpm,volts,amps\n'
                       b'1750,12.9,1.9\n2200,13.2,5.0\n2700,13.5,8.7\n3300,13.7,12.6\n',
           'fleet_csv': b'machine,build,count,kit,air,set\nmower,mower.yaml,2,night-work,-5 C,accessories[0].count=2\n'}
    return [('own', own[target])] + [t for t in tables if len(t[1]) <= TARGETS[target]]


def main():
    words = argparse.ArgumentParser(description=__doc__.splitlines()[0])
    words.add_argument('targets', nargs='*', help='those to run (default: all there are)')
    words.add_argument('--seconds', type=int, default=60, help='for each target')
    args = words.parse_args()
    there = re.findall(r'^name = "(\w+)"$', (HERE / 'Cargo.toml').read_text(), re.M)
    subprocess.run(['cargo', '+nightly', 'fuzz', 'build', *BUILD], check=True, cwd=HERE)
    total, bad = 0, 0
    for target in args.targets or [t for t in TARGETS if t in there]:
        corpus = HERE / 'corpus' / target
        corpus.mkdir(parents=True, exist_ok=True)
        for name, text in seeds(target):
            (corpus / f'seed-{name}').write_bytes(text)
        empty = tempfile.mkdtemp()  # patterns of a fleet find nothing there
        run = subprocess.run(
            ['cargo', '+nightly', 'fuzz', 'run', *BUILD, target, str(corpus), '--', f'-max_len={TARGETS[target]}',
             f'-max_total_time={args.seconds}', '-timeout=10', '-rss_limit_mb=1500', '-print_final_stats=1', '-verbosity=0'],
            cwd=empty, capture_output=True, text=True, errors='replace')
        shutil.rmtree(empty)
        done = re.findall(r'stat::number_of_executed_units:\s*(\d+)', run.stderr)
        count = int(done[-1]) if done else 0
        total += count
        print(f'{target:12} {count:>12,} executions, {len(list(corpus.iterdir())):,} inputs kept, exit {run.returncode}', flush=True)
        if run.returncode:
            bad = 1
            print(run.stderr[-3000:], file=sys.stderr)
    print(f'{"all":12} {total:>12,}')
    return bad


if __name__ == '__main__':
    sys.exit(main())
