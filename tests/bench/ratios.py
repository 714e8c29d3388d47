#!/usr/bin/env python3
"""Measures the program against what it must reach, in one run: standard library, cargo and valgrind only.

    python3 tests/bench/ratios.py            all
    python3 tests/bench/ratios.py check fleet …   those named: check, instructions, fleet, threads, odds, input, simulator

Prints one line a figure, its bound beside it; exit 1 where one is missed. The builds are invented. What is compared is
run in turn, pair by pair, and the ratio is the median of the pairs' ratios, so that whatever else the machine does
falls on both alike. The load while it ran is printed with it.
"""
import json, os, re, shutil, subprocess, sys, tempfile, time

ROOT = os.path.dirname(os.path.dirname(os.path.dirname(os.path.abspath(__file__))))
TARGET = os.environ.get('CARGO_TARGET_DIR', os.path.join(ROOT, 'target'))
PROGRAM = os.path.join(TARGET, 'release', 'ampledger')
missed = []


def said(name, figure, bound, holds):
    """One line; keeps what misses its bound."""
    print(f"{'holds ' if holds else 'MISSED'}  {name:34} {figure:34} {bound}", flush=True)
    if not holds:
        missed.append(name)


def forty():
    loads = '\n'.join(
        f'  - {{name: load {k}, draw: {0.2 + .01 * k:.2f} A, duty: {{governed: {37 + 5 * k if k < 10 else 100} %, idle: 100 %}}}}'
        for k in range(40))
    return f'''build: forty loads
air: 15 °C
engine: {{speeds: {{idle: 1800 rpm, governed: 3400 rpm}}, starter: {{draw: 150 A, time: 2.5 s}}}}
charging:
  - winding: {{rated: 16 A at 3600 rpm, open_circuit: 28 V at 3600 rpm, resistance: 0.14 ohm, poles: 12}}
    rectifier: full-wave
    regulator: {{holds: 14.4 V}}
battery: {{capacity: 30 Ah, cold_cranking: 300 A, type: flooded}}
accessories:
{loads}
shift: [crank, {{idle: 12 min}}, {{governed: 95 min}}, {{stopped: 20 min}}, crank, {{governed: 110 min}}, {{idle: 18 min}}]
parked: 15 h
'''


def one_of_many(k, tolerance=''):
    """No two alike: most keep up, two in five lack charge after some shifts."""
    share = lambda prime: k * prime % 1009 / 1009
    return f'''build: machine {k}
air: {5 + 30 * share(11):.1f} °C
engine: {{speeds: {{idle: {1600 + 400 * share(13):.0f} rpm, governed: 3400 rpm}}, starter: {{draw: 150 A, time: 2.5 s}}}}
charging:
  - winding: {{rated: {14 + 6 * share(17):.2f} A at 3600 rpm, open_circuit: 28 V at 3600 rpm{tolerance}, resistance: 0.14 ohm{tolerance}, poles: 12}}
    rectifier: full-wave
    regulator: {{holds: 14.4 V}}
battery: {{capacity: {24 + 12 * share(19):.1f} Ah, cold_cranking: 380 A, type: flooded}}
accessories:
  - {{name: PTO clutch, draw: 3.1 ohm{tolerance}, duty: {{governed: {60 + 40 * share(23):.1f} %}}}}
  - {{name: work lamps, draw: {30 + 150 * share(29) + k / 1e6:.6f} W, duty: {{idle: 100 %, governed: 100 %}}}}
  - {{name: beacon, draw: 1.2 A{tolerance}, duty: 100 %}}
  - {{name: pump, draw: 6 A, duty: {{governed: 30 %}}}}
shift: [crank, {{idle: 12 min}}, {{governed: {60 + k % 60} min}}, {{stopped: 20 min}}, crank, {{governed: 110 min}}, {{idle: 18 min}}]
parked: 15 h
'''


def run(args, threads=None):
    """Seconds on the clock, seconds of all cores, peak memory in MiB."""
    env = dict(os.environ) if threads is None else dict(os.environ, RAYON_NUM_THREADS=str(threads))
    begun = time.perf_counter()
    p = subprocess.Popen(args, stdout=subprocess.DEVNULL, stderr=subprocess.DEVNULL, env=env)
    _, status, used = os.wait4(p.pid, 0)
    p.returncode = os.waitstatus_to_exitcode(status)
    if p.returncode not in (0, 1):
        sys.exit(f'exit {p.returncode} from {" ".join(args)}')
    return time.perf_counter() - begun, used.ru_utime + used.ru_stime, used.ru_maxrss / 1024


def median(values):
    return sorted(values)[len(values) // 2]


def ratio(pairs, over, under, of=0):
    """Median of the pairs' own ratios of one figure: 0 seconds on the clock, 1 seconds of all cores."""
    return median([p[over][of] / p[under][of] for p in pairs])


def check(folder):
    """`check` of the forty-accessory build against `--version`, whole processes, in turn; beside it the same with constant
    powers of as many watts at 12 V, which the bound does not name and which take longer."""
    powers = re.sub(r'draw: ([0-9.]+) A, duty', lambda m: f'draw: {12 * float(m[1]):.2f} W, duty', forty())
    for name, text in {'currents': forty(), 'powers': powers}.items():
        path = os.path.join(folder, f'forty-{name}.yaml')
        open(path, 'w').write(text)
        pairs = [(run([PROGRAM, '--version']), run([PROGRAM, 'check', path])) for _ in range(101)]
        base, one = (median([p[k][0] for p in pairs]) * 1e3 for k in (0, 1))
        times = ratio(pairs, 1, 0)
        cores = median([p[1][1] for p in pairs]) / median([p[0][1] for p in pairs])
        figure = f'{times:.1f} × ({one:.1f} ms for {base:.1f} ms; of the cores {cores:.1f} ×)'
        if name == 'currents':
            said('check against --version', figure, 'at most 5 ×', times <= 5)
        else:
            print(f"        {'check of constant powers':34} {figure}", flush=True)


def instructions(folder):
    """Instructions of one verdict with its Ah lacking: the difference between eleven and one, over ten."""
    if not shutil.which('valgrind'):
        return said('instructions of one verdict', 'no valgrind here', '', False)
    made = subprocess.run(['cargo', 'bench', '--no-run', '--bench', 'verdict', '--message-format=json'],
                          cwd=ROOT, capture_output=True, text=True, check=True).stdout
    found = [json.loads(line) for line in made.splitlines()]
    program = [m['executable'] for m in found if m.get('executable') and m['target']['name'] == 'verdict'][-1]

    def counted(times):
        out = subprocess.run(['valgrind', '--tool=callgrind', f'--callgrind-out-file={folder}/callgrind', program, str(times)],
                             capture_output=True, text=True).stderr
        return int(re.search(r'Collected : (\d+)', out)[1])
    each = (counted(11) - counted(1)) / 10
    said('instructions of one verdict', f'{each / 1e6:.2f} million', 'at most 10 million', each <= 10e6)


def fleet_of(folder, n):
    path = os.path.join(folder, f'{n}.csv')
    with open(path, 'w') as sheet:
        sheet.write('machine,build,count,kit\n')
        for k in range(n):
            build = os.path.join(folder, f'{k}.yaml')
            if not os.path.exists(build):
                open(build, 'w').write(one_of_many(k))
            sheet.write(f'm{k},{k}.yaml,1,\n')
    return path


def fleet(folder):
    """Ten times the build files, no two alike, and the memory that takes. (Rows that name one file with one kit and the
    same changes are judged once: a fleet of those says nothing of the speed.)"""
    small, big = ([PROGRAM, 'fleet', fleet_of(folder, n), '--no-remedy', '--format', 'csv'] for n in (1000, 10000))
    pairs = [(run(small), run(big)) for _ in range(3)]
    b, cores, times = median([p[1][0] for p in pairs]), median([p[1][1] for p in pairs]), ratio(pairs, 1, 0)
    work = ratio(pairs, 1, 0, of=1)
    figure = f'{times:.1f} × the time ({10000 / b:.0f} builds a second), {work:.1f} × the work'
    said('10 × the builds', figure, 'at most 11 ×', times <= 11)
    print(f"        {'time of all cores for one build':34} {cores / 10:.2f} ms")
    most = max(p[1][2] for p in pairs)
    said('memory of 10,000 builds', f'{most:.1f} MiB', 'under 64 MiB', most < 64)


def threads(folder):
    """One thread against two on a thousand builds."""
    args = [PROGRAM, 'fleet', fleet_of(folder, 1000), '--no-remedy', '--format', 'csv']
    pairs = [(run(args, 1), run(args, 2)) for _ in range(7)]
    times, work = ratio(pairs, 0, 1), ratio(pairs, 1, 0, of=1)
    said('two threads against one', f'{times:.2f} × as fast ({work:.2f} × the work)', 'at least 1.8 ×', times >= 1.8)


def odds(folder):
    """Ten thousand draws."""
    path = os.path.join(folder, 'odds.yaml')
    open(path, 'w').write(one_of_many(7, ' ± 8 %'))
    took = run([PROGRAM, 'odds', path, '--runs', '10000'])[0]
    print(f"        {'odds of 10,000 draws':34} {took:.1f} s ({10000 / took:.0f} draws a second)")


def refused(folder):
    """What is no build is refused, exit 2, in under 0.1 s: too large, a bomb of aliases, nested too deep, no number."""
    bomb = 'a: &a [x]\n' + ''.join(f'{chr(98 + k)}: &{chr(98 + k)} [' + ', '.join([f'*{chr(97 + k)}'] * 9) + ']\n' for k in range(9))
    texts = {'large': 'build: ' + 'x' * (2 << 20), 'bomb': bomb, 'deep': 'build: ' + '[' * 20000, 'number': 'air: .nan\n' * 3}
    worst = 0
    for name, text in texts.items():
        path = os.path.join(folder, f'{name}.yaml')
        open(path, 'w').write(text)
        times = []
        for _ in range(15):
            begun = time.perf_counter()
            code = subprocess.run([PROGRAM, 'check', path], capture_output=True).returncode
            times.append(time.perf_counter() - begun)
            if code != 2:
                sys.exit(f'exit {code} for {name}')
        worst = max(worst, median(times))
    said('input that is no build refused', f'{worst * 1e3:.0f} ms at most', 'under 100 ms', worst < 0.1)


def simulator(_):
    """One winding current against a circuit simulator's run of the same case: the live test prints and holds it."""
    if not shutil.which('ngspice'):
        return print(f"        {'winding current':34} no ngspice here")
    r = subprocess.run(['cargo', 'test', '--release', '-q', '--features', 'live', '--test', 'live_ngspice', '--', '--nocapture'],
                       cwd=ROOT, capture_output=True, text=True)
    lines = [line for line in r.stdout.splitlines() if 'times faster' in line]
    said('winding current against ngspice', (lines or ['no figure printed'])[-1].strip()[:70], 'at least 100,000 ×', r.returncode == 0)


ALL = dict(check=check, instructions=instructions, fleet=fleet, threads=threads, odds=odds, input=refused, simulator=simulator)

if __name__ == '__main__':
    wanted = sys.argv[1:] or list(ALL)
    if any(name not in ALL for name in wanted):
        sys.exit(__doc__)
    subprocess.run(['cargo', 'build', '--release', '-q', '--locked'], cwd=ROOT, check=True)
    with tempfile.TemporaryDirectory() as folder:
        for name in wanted:
            ALL[name](folder)
    print(f'        load while it ran: {os.getloadavg()[1]:.1f} on {os.cpu_count()} cores')
    sys.exit(bool(missed))
