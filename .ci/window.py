#!/usr/bin/env python3
"""The built program in a real window under a virtual display, driven by real key and mouse events.

Main job: a table is opened, a reading drawn at run time is typed, a function is chosen, the record is named,
a key is made, the report is signed; independent readers then check the PDF. Kill test: the program is killed at
seeded moments after Enter, and every acknowledged reading must be found again.

Places are pixels of a 1440 x 900 window; the fonts are the program's own, so they do not move between machines.
"""
import json, os, random, re, shutil, signal, subprocess, sys, tempfile, time
from pathlib import Path

PROGRAM = str(Path(sys.argv[1]).resolve())
DISPLAY = ":93"
ENV = dict(os.environ, DISPLAY=DISPLAY, LIBGL_ALWAYS_SOFTWARE="1", ASSIZE_DIARY="1")
ENV.pop("WAYLAND_DISPLAY", None)
KILLS = 50
ROWS = [(0.5, 0.2021), (1, 0.4002), (1.5, 0.5961), (2, 0.7921), (3, 1.1785), (4, 1.5589), (5, 1.9352),
        (0.5, 0.2013), (1, 0.4011), (2, 0.7930), (3, 1.1771), (4, 1.5598), (5, 1.9345)]
# Where things are: entry row of the readings below thirteen rows, fields of the plan, the panel of the record.
ENTRY, NEXT_READING = (215, 501), (330, 525)
NUMBER, IDENTITY = (286, 393), (650, 155)
REPORT, NEW_KEY = (1225, 122), (1180, 387)
KEY_NAME, KEY_PATH, KEY_PASS, KEY_AGAIN, MAKE_KEY = (1265, 417), (1218, 468), (1265, 519), (1265, 570), (1181, 657)
PASSPHRASE, SIGN = (1265, 302), (1212, 421)


def run(*args, **kw):
    return subprocess.run(args, check=True, capture_output=True, text=True, **kw).stdout


def need(fine, what):
    if not fine:
        sys.exit(f"window: {what}")


class Window:
    """One run of the program with its own home."""

    def __init__(self, home, *args):
        self.home = home
        env = dict(ENV, HOME=str(home), XDG_DATA_HOME=str(home / "data"), XDG_CONFIG_HOME=str(home / "config"))
        self.diary = open(home / "diary", "w+")
        begun = time.monotonic()
        self.process = subprocess.Popen([PROGRAM, *args], env=env, stderr=self.diary, cwd=home)
        self.id = self.find()
        self.seconds = time.monotonic() - begun
        run("xdotool", "windowfocus", "--sync", self.id, env=ENV)

    def find(self):
        for _ in range(200):
            need(self.process.poll() is None, f"the program ended with {self.process.poll()}: {self.said()}")
            found = subprocess.run(["xdotool", "search", "--onlyvisible", "--pid", str(self.process.pid)],
                                   env=ENV, capture_output=True, text=True).stdout.split()
            if found:
                return found[0]
            time.sleep(0.05)
        sys.exit("window: no window within 10 s")

    def said(self):
        return (self.home / "diary").read_text()

    def acknowledged(self):
        return [int(n) for n in re.findall(r"entry (\d+) on disk", self.said())]

    def keys(self, *names):
        run("xdotool", "key", "--delay", "40", *names, env=ENV)

    def text(self, text):
        run("xdotool", "type", "--delay", "35", text, env=ENV)

    def click(self, place):
        run("xdotool", "mousemove", "--window", self.id, str(place[0]), str(place[1]), "click", "1", env=ENV)
        time.sleep(0.5)

    def wait_for(self, entries, what):
        for _ in range(100):
            if entries in self.acknowledged():
                return
            time.sleep(0.05)
        self.picture("stuck")
        sys.exit(f"window: {what} was not acknowledged; diary: {self.said()!r}")

    def picture(self, name):
        folder = Path(os.environ.get("ASSIZE_PICTURES", self.home))
        run("import", "-window", self.id, str(folder / f"{name}.png"), env=ENV)

    def ticks(self):
        fields = Path(f"/proc/{self.process.pid}/stat").read_text().rsplit(")", 1)[1].split()
        return int(fields[11]) + int(fields[12])

    def close(self):
        self.keys("alt+F4")
        try:
            need(self.process.wait(10) == 0, f"closing ended with {self.process.returncode}")
        except subprocess.TimeoutExpired:
            sys.exit("window: it does not close")


def table(path, rows):
    path.write_text('"load, kN","output, mV/V"\n' + "".join(f"{x},{y}\n" for x, y in rows))


def assize(*args):
    return run(PROGRAM, *[str(a) for a in args])


def quadratic(source):
    fits = json.loads(assize("fit", source, "--json"))["fits"]
    found = next(f for f in fits if f["family"] == "quadratic")
    return [c["value"] for c in found["coefficients"]]


def main_job(home):
    drawn = f"{0.9863 + random.uniform(-0.0009, 0.0009):.6f}"
    table(home / "data.csv", ROWS)
    w = Window(home, "open", str(home / "data.csv"))
    print(f"window visible after {w.seconds:.2f} s")
    time.sleep(1.0)
    w.keys("Return")                      # take these 13 readings
    time.sleep(0.5)
    w.text("A. Tester")
    w.keys("Return")
    w.wait_for(4, "the import")
    w.keys("ctrl+2")
    time.sleep(0.5)
    w.click(ENTRY)
    w.text("2.5"); w.keys("Tab"); w.text(drawn); w.keys("Return")
    w.wait_for(5, "the typed reading")
    w.keys("ctrl+z"); w.wait_for(6, "taking back")
    w.keys("ctrl+y"); w.wait_for(7, "putting back")
    w.picture("bench")
    w.keys("ctrl+3"); time.sleep(0.7); w.picture("compare")
    w.keys("Return"); time.sleep(0.7); w.keys("Return")
    w.wait_for(8, "the choice")
    w.keys("ctrl+1"); time.sleep(0.5)
    w.click(NUMBER); w.text("W-1"); w.keys("Return"); w.wait_for(9, "the number")
    w.click(IDENTITY); w.text("TL-99"); w.keys("Return"); w.wait_for(10, "the identity")
    w.picture("plan")
    w.keys("ctrl+4"); time.sleep(1.5)
    w.click(REPORT); w.keys("ctrl+a"); w.text(str(home / "report.pdf")); w.keys("Return")
    w.click(NEW_KEY); time.sleep(0.4)
    w.click(KEY_NAME); w.text("A. Tester")
    w.click(KEY_PATH); w.text(str(home / "key.p12"))
    w.click(KEY_PASS); w.text("horse")
    w.click(KEY_AGAIN); w.text("horse")
    w.click(MAKE_KEY); time.sleep(1.5)
    need((home / "key.p12").exists(), "no key was made")
    w.click(PASSPHRASE); w.text("horse")
    w.click(SIGN)
    w.wait_for(11, "the signature")
    time.sleep(1.0)
    w.picture("record")
    before = w.ticks()
    time.sleep(3)
    need(w.ticks() - before <= 2, f"{w.ticks() - before} ticks of processor time in 3 s of doing nothing")
    w.close()
    check(home, drawn)


def check(home, drawn):
    pdf = home / "report.pdf"
    signature = run("pdfsig", str(pdf))
    need("Signature is Valid." in signature and "Total document signed" in signature, signature)
    run("qpdf", "--check", str(pdf))
    words = run("pdftotext", "-layout", str(pdf), "-")
    need(drawn in words, f"{drawn} is not in the report")
    need("A. Tester" in words and "W-1" in words and "TL-99" in words, "a name is missing in the report")
    project = next((home / "data").rglob("*.assize"))
    need(drawn in project.read_text(), f"{drawn} is not in the trail")
    table(home / "again.csv", ROWS + [(2.5, drawn)])
    found, expected, without = quadratic(project), quadratic(home / "again.csv"), quadratic(home / "data.csv")
    need(found == expected and found != without, f"coefficients {found}, expected {expected}")
    answer = json.loads(assize("verify", pdf, "--json"))
    need(answer["answer"] == "unaltered, signer unknown" and answer["figures_checked"] > 100, str(answer))
    print(f"main job: reading {drawn} in table, trail and coefficients; {answer['figures_checked']} figures recomputed")


def kill_test(home, base):
    rng = random.Random(20261201)
    after = before = 0
    for n in range(KILLS):
        room = home / f"kill-{n}"
        room.mkdir()
        project = room / "link.assize"
        shutil.copy(base, project)
        w = Window(room, "open", str(project))
        w.before = project.read_text().splitlines()[1:]
        time.sleep(0.6)
        w.keys("ctrl+2")
        time.sleep(0.3)
        w.click(ENTRY)
        w.text("2.5"); w.keys("Tab"); w.text("0.98"); w.keys("Return")
        time.sleep(0.4)
        w.keys("Return")                  # still the same person at the bench
        w.wait_for(len(w.before) + 1, "the first reading")
        told = len(w.acknowledged())
        w.click(NEXT_READING)
        value = f"{rng.uniform(0.1, 1.9):.7f}"
        w.text(value)
        # Most kills fall between Enter and the next prompt; the others show that the acknowledgement is to be had.
        pause = rng.uniform(0.0, 0.02) if n % 3 else rng.uniform(0.3, 1.0)
        run("xdotool", "key", "--delay", "0", "Return", env=ENV)
        time.sleep(pause)
        w.process.send_signal(signal.SIGKILL)
        w.process.wait()
        acknowledged = len(w.acknowledged()) - told
        kept = value in project.read_text()
        need(kept or acknowledged == 0, f"kill {n} after {pause * 1000:.0f} ms: {value} was acknowledged and is gone")
        count = json.loads(assize("fit", project, "--json"))["data"]["n"]
        need(count == len(ROWS) + 1 + kept, f"kill {n}: {count} readings after opening again")
        after += acknowledged
        before += 1 - acknowledged
        shutil.rmtree(room)
    need(after > 0, "no kill came after an acknowledgement: the test shows nothing")
    print(f"kill test: {KILLS} kills, {after} after the acknowledgement, {before} before; nothing acknowledged was lost")


def main():
    server = subprocess.Popen(["Xvfb", DISPLAY, "-screen", "0", "1600x1000x24"], stderr=subprocess.DEVNULL)
    time.sleep(1.5)
    manager = subprocess.Popen(["openbox"], env=ENV, stderr=subprocess.DEVNULL)
    time.sleep(0.7)
    try:
        with tempfile.TemporaryDirectory() as folder:
            home = Path(folder)
            (home / "job").mkdir()
            main_job(home / "job")
            table(home / "data.csv", ROWS)
            assize("new", home / "data.csv", "--by", "A. Tester", "--out", home / "base.assize")
            kill_test(home, home / "base.assize")
    finally:
        manager.terminate()
        server.terminate()


main()
