"""sinewright-batch run as a user runs it, on good and bad input. Standard library only."""
import copy
import json
import math
import os
import pathlib
import random
import subprocess
import sys
import tempfile
import unittest

BATCH = os.environ["SINEWRIGHT_BATCH"]
LINEAR = pathlib.Path(__file__).parent / "linear"
GOOD = LINEAR / "wien-equal.sinewright"
LIMIT_S = 60  # against hanging for ever; no time is asserted


def run(*arguments, **options):
    return subprocess.run([BATCH, *map(str, arguments)], capture_output=True, timeout=LIMIT_S, **options)


def good_design():
    return json.loads(GOOD.read_text())


def part(design, ref):
    return next(p for p in design["parts"] if p["ref"] == ref)


def two_part_design(*parts):
    return {"format": "sinewright-design", "version": 1, "output": "out", "parts": list(parts)}


class Case(unittest.TestCase):
    def setUp(self):
        folder = tempfile.TemporaryDirectory()
        self.addCleanup(folder.cleanup)
        self.folder = pathlib.Path(folder.name)

    def write(self, content, name="design.sinewright"):
        path = self.folder / name
        if isinstance(content, dict):
            content = json.dumps(content)
        path.write_bytes(content if isinstance(content, bytes) else content.encode())
        return path

    def assert_refused(self, content_or_path, *named, verb="check"):
        """Exit status 2, nothing on standard output, a message that names the thing."""
        path = content_or_path if isinstance(content_or_path, pathlib.Path) else self.write(content_or_path)
        for arguments in ([verb, path], [verb, path, "--json"]):
            done = run(*arguments)
            message = done.stderr.decode("utf-8")  # valid UTF-8, whatever was in the file
            self.assertEqual(done.returncode, 2, message)
            self.assertEqual(done.stdout, b"")
            self.assertTrue(message.strip(), "a message was wanted")
            for name in named:
                self.assertIn(name, message)
        return message


class FilesThatCannotBeRead(Case):
    def test_an_empty_file(self):
        self.assert_refused(b"", "design.sinewright")

    def test_a_file_cut_off_anywhere(self):
        whole = GOOD.read_bytes().rstrip()
        for length in range(1, len(whole), 37):
            with self.subTest(length=length):
                self.assert_refused(whole[:length])

    def test_random_bytes(self):
        for start in range(40):
            with self.subTest(start=start):
                self.assert_refused(random.Random(start).randbytes(1 + 50 * start))

    def test_random_changes_of_one_byte_never_crash(self):
        whole = GOOD.read_bytes()
        stream = random.Random(1)
        for _ in range(150):
            changed = bytearray(whole)
            changed[stream.randrange(len(changed))] = stream.randrange(256)
            done = run("check", self.write(bytes(changed)), "--json")
            self.assertIn(done.returncode, (0, 1, 2), bytes(changed))
            if done.returncode == 2:
                self.assertEqual(done.stdout, b"")
            else:
                json.loads(done.stdout)

    def test_utf_16(self):
        self.assert_refused(GOOD.read_text().encode("utf-16"), "UTF-8")

    def test_bytes_that_are_not_utf_8(self):
        self.assert_refused(GOOD.read_bytes().replace(b'"title": "', b'"title": "\xff\xfe'), "UTF-8")

    def test_json_that_is_no_design(self):
        for text in ("[]", "3", "null", '"text"', "{}", '{"format": "something-else", "version": 1}'):
            with self.subTest(text=text):
                self.assert_refused(text)

    def test_brackets_nested_a_hundred_thousand_deep(self):
        self.assert_refused(b"[" * 100_000)
        self.assert_refused(b'{"a":' * 100_000)

    def test_a_folder(self):
        self.assert_refused(self.folder, str(self.folder), "folder")

    def test_a_missing_file(self):
        self.assert_refused(self.folder / "no-such.sinewright", "no-such.sinewright")

    def test_a_file_without_permission_to_read(self):
        path = self.write(good_design())
        path.chmod(0)
        options = {}
        if os.getuid() == 0:  # root may read anything: be somebody else for this one
            self.folder.chmod(0o755)
            options = {"user": 65534, "group": 65534, "extra_groups": []}
            if run("describe", **options).returncode != 0:
                self.skipTest("the program itself can't be run by another user here")
        done = run("check", path, **options)
        self.assertEqual(done.returncode, 2, done.stderr)
        self.assertEqual(done.stdout, b"")
        self.assertIn(b"design.sinewright", done.stderr)

    def test_a_newer_version(self):
        self.assert_refused(good_design() | {"version": 3}, "newer", "3", "1")

    def test_two_thousand_and_one_parts(self):
        resistor = {"kind": "resistor", "resistance": 1000, "terminals": {"a": "out", "b": "gnd"}}
        parts = [resistor | {"ref": f"R{k}"} for k in range(2001)]
        message = self.assert_refused(two_part_design(*parts), "2")
        self.assertRegex(message, r"2.?000|2001")

    def test_more_than_eight_mebibytes(self):
        self.assert_refused(good_design() | {"notes": "x" * (8 << 20)}, "8 MiB")


class ValuesThatMakeNoSense(Case):
    def refused_with(self, ref, key, value, *named):
        design = good_design()
        part(design, ref)[key] = value
        self.assert_refused(json.dumps(design), ref, *named)

    def test_not_a_number_and_numbers_without_end(self):
        for word in ("NaN", "Infinity", "-Infinity", "1e999", "-1e999"):
            with self.subTest(word=word):
                text = json.dumps(good_design()).replace('"resistance": 10000.0', f'"resistance": {word}', 1)
                self.assertIn(word, text)
                self.assert_refused(text)

    def test_numbers_without_end_in_quotes(self):
        for word in ("nan", "inf", "1e999", "1e400k", ""):
            with self.subTest(word=word):
                self.refused_with("R1", "resistance", word, "resistance")

    def test_negative_and_zero_values(self):
        for ref, key in (("R1", "resistance"), ("C1", "capacitance")):
            for value in (0, -1, "-4k7", "0", -0.0):
                with self.subTest(ref=ref, value=value):
                    self.refused_with(ref, key, value, key)

    def test_a_value_of_the_wrong_type(self):
        for value in ([], {}, True, None, "ten"):
            with self.subTest(value=value):
                self.refused_with("R1", "resistance", value, "resistance")

    def test_a_missing_value(self):
        design = good_design()
        del part(design, "R1")["resistance"]
        self.assert_refused(design, "R1", "resistance")

    def test_extreme_but_finite_values_end_in_an_answer_or_a_message(self):
        for value in (1e-300, 5e-324, 1e300, 1.7e308):
            for ref, key in (("R1", "resistance"), ("C1", "capacitance")):
                with self.subTest(ref=ref, value=value):
                    design = good_design()
                    part(design, ref)[key] = value
                    done = run("check", self.write(design), "--json")
                    self.assertIn(done.returncode, (0, 1, 2), done.stderr)
                    if done.returncode == 2:
                        self.assertEqual(done.stdout, b"")
                        self.assertTrue(done.stderr.strip())

    def test_an_unknown_key_is_named(self):
        self.refused_with("R1", "resistence", 1000, "resistence")

    def test_an_unknown_kind_is_named(self):
        self.refused_with("R1", "kind", "flux-coil", "flux-coil")

    def test_two_parts_of_one_name(self):
        design = good_design()
        design["parts"].append(copy.deepcopy(part(design, "R1")))
        self.assert_refused(design, "R1")


class CircuitsThatCannotBeSolved(Case):
    def test_a_cut_on_a_missing_part(self):
        self.assert_refused(good_design() | {"cut": {"part": "U9", "terminal": "plus"}}, "U9")

    def test_a_cut_on_a_missing_terminal(self):
        self.assert_refused(good_design() | {"cut": {"part": "U1", "terminal": "sideways"}}, "sideways")

    def test_an_output_that_is_no_net(self):
        self.assert_refused(good_design() | {"output": "nowhere"}, "nowhere")

    def test_an_unconnected_op_amp(self):
        design = good_design()
        part(design, "U1")["terminals"] = {"plus": None, "minus": None, "out": None}
        self.assert_refused(design, "U1")

    def test_two_supplies_in_parallel(self):
        supply = {"kind": "supply", "terminals": {"plus": "out", "minus": "gnd"}}
        self.assert_refused(two_part_design(supply | {"ref": "V1", "voltage": 5}, supply | {"ref": "V2", "voltage": 9},
                                            {"ref": "R1", "kind": "resistor", "resistance": 1000,
                                             "terminals": {"a": "out", "b": "gnd"}}), "V1", "V2")

    def test_a_net_that_reaches_nothing(self):
        design = good_design()
        part(design, "C1")["terminals"]["a"] = "lonely"
        self.assert_refused(design, "lonely")

    def test_a_net_name_with_control_characters(self):
        design = good_design()
        part(design, "C1")["terminals"]["a"] = part(design, "R1")["terminals"]["b"] = "o\x07\x1b[2Jt"
        message = self.assert_refused(design, "o??[2Jt")
        self.assertNotIn("\x1b", message)
        self.assertNotIn("\x07", message)

    def test_no_parts(self):
        self.assert_refused(good_design() | {"parts": []})


class Options(Case):
    def refused(self, *arguments):
        done = run(*arguments)
        self.assertEqual(done.returncode, 2, done.stderr)
        self.assertEqual(done.stdout, b"")
        self.assertTrue(done.stderr.strip())

    def test_bad_options(self):
        for arguments in ((), ("checks", GOOD), ("check",), ("check", GOOD, "--jsn"), ("check", GOOD, GOOD),
                          ("curves", GOOD), ("curves", GOOD, "--from", "0", "--to", "10", "--points", "5"),
                          ("curves", GOOD, "--from", "10", "--to", "1", "--points", "5"),
                          ("curves", GOOD, "--from", "ten", "--to", "100", "--points", "5"),
                          ("curves", GOOD, "--from", "nan", "--to", "100", "--points", "5"),
                          ("curves", GOOD, "--from", "1", "--to", "inf", "--points", "5"),
                          ("curves", GOOD, "--from", "1", "--to", "10", "--points", "1"),
                          ("curves", GOOD, "--from", "1", "--to", "10", "--points", "-3"),
                          ("curves", GOOD, "--from", "1", "--to", "10", "--points", "99999999999999999999"),
                          ("curves", GOOD, "--from", "1", "--to", "10", "--points", "5", "--csv", "--json")):
            with self.subTest(arguments=arguments):
                self.refused(*arguments)

    def test_help_of_each_verb_has_an_example(self):
        for verb in ("check", "curves", "describe"):
            done = run(verb, "--help")
            self.assertEqual(done.returncode, 0)
            self.assertIn(f"sinewright-batch {verb}", done.stdout.decode())
        self.assertEqual(run("--help").returncode, 0)

    @unittest.skipUnless(os.path.exists("/dev/full"), "no full device here")
    def test_a_full_disk_behind_standard_output_is_an_internal_limit(self):
        with open("/dev/full", "wb") as full:
            done = subprocess.run([BATCH, "check", str(GOOD)], stdout=full, stderr=subprocess.PIPE, timeout=LIMIT_S)
        self.assertEqual(done.returncode, 3)
        self.assertTrue(done.stderr.strip())

    def test_a_reader_that_leaves_after_one_line_is_no_failure_of_ours(self):
        command = f'"{BATCH}" curves "{GOOD}" --from 1 --to 1e6 --points 100000 --csv | head -1'
        done = subprocess.run(["bash", "-c", command], capture_output=True, timeout=LIMIT_S)
        self.assertEqual(done.stdout.decode().strip(), "frequency_hz,re,im,gain_db,phase_deg")
        self.assertEqual(done.stderr, b"")


class Results(Case):
    def finite(self, value):
        if isinstance(value, float):
            self.assertTrue(math.isfinite(value))
        for inner in value.values() if isinstance(value, dict) else value if isinstance(value, list) else ():
            self.finite(inner)

    def check_json(self, content):
        done = run("check", content if isinstance(content, pathlib.Path) else self.write(content), "--json")
        self.assertEqual(done.stderr, b"")
        return done.returncode, json.loads(done.stdout)

    def test_the_exit_status_of_every_reference_design(self):
        expected = json.loads((LINEAR / "expected.json").read_text())
        for name, wanted in expected.items():
            with self.subTest(name=name):
                status, found = self.check_json(LINEAR / f"{name}.sinewright")
                self.assertEqual(status, wanted["exit_status"])
                self.assertEqual(found["small_signal"]["outcome"], wanted["outcome"])
                self.assertEqual(found["verdict"], "meets" if status == 0 else "misses")
                self.finite(found)

    def test_every_null_has_a_reason_beside_it(self):
        def walk(value):
            if isinstance(value, dict):
                for key, inner in value.items():
                    if inner is None and key != "met":
                        self.assertTrue(value.get(key + "_reason"), key)
                    walk(inner)
            elif isinstance(value, list):
                for inner in value:
                    walk(inner)
        for path in LINEAR.glob("*.sinewright"):
            walk(self.check_json(path)[1])

    def test_targets_decide_the_exit_status(self):
        margin = {"startup_margin_db": {"min": 0.2, "max": 0.4}}
        for targets, status, verdict, met in (
                (margin, 0, "meets", [True]),
                ({"startup_margin_db": {"min": 0.3}}, 1, "misses", [False]),
                ({"frequency_hz": {"nominal": 1590, "within": "1%"}}, 0, "meets", [True]),
                ({"frequency_hz": {"nominal": 1700, "within": "1%"}}, 1, "misses", [False])):
            with self.subTest(targets=targets):
                found_status, found = self.check_json(good_design() | {"targets": targets})
                self.assertEqual((found_status, found["verdict"]), (status, verdict))
                self.assertEqual([t["met"] for t in found["targets"]], met)

    def test_nominal_and_within_become_limits(self):
        _, found = self.check_json(good_design() | {"targets": {"frequency_hz": {"nominal": 1000, "within": "2%"}}})
        self.assertAlmostEqual(found["targets"][0]["min"], 980, places=9)
        self.assertAlmostEqual(found["targets"][0]["max"], 1020, places=9)

    def test_an_ideal_op_amp_cut_at_its_output_says_so_and_names_a_better_cut(self):
        status, found = self.check_json(good_design() | {"cut": {"part": "U1", "terminal": "out"}})
        self.assertEqual(status, 0)
        self.assertIsNone(found["loop"])
        self.assertIn("U1", found["loop_reason"])
        self.assertRegex(found["loop_reason"], "Cut at .* instead")

    def test_no_cut_in_the_file_gets_one_chosen_and_named(self):
        design = good_design()
        del design["cut"]
        _, found = self.check_json(design)
        self.assertTrue(found["loop"]["cut_chosen"])
        self.assertTrue(found["loop"]["cut_reason"])
        self.assertAlmostEqual(found["loop"]["barkhausen"]["startup_margin_db"], 20 * math.log10(3.1 / 3), places=6)

    def test_places_never_change_a_result(self):
        design = good_design()
        _, before = self.check_json(design)
        for k, p in enumerate(design["parts"]):
            p["place"] = {"x": 40 * k, "y": -20 * k, "turn": 90, "flip": k % 2 == 1}
        self.assertEqual(self.check_json(design)[1], before)

    def test_curves_agree_between_json_and_csv(self):
        options = ("--from", "100", "--to", "10000", "--points", "21")
        curve = json.loads(run("curves", GOOD, *options).stdout)
        self.assertEqual(curve["format"], "sinewright-curves")
        rows = run("curves", GOOD, *options, "--csv").stdout.decode().splitlines()
        names = rows[0].split(",")
        for k, row in enumerate(rows[1:]):
            for name, value in zip(names, row.split(",")):
                self.assertAlmostEqual(float(value), curve[name][k], delta=1e-12 * max(1, abs(curve[name][k])))
        self.assertEqual(len(rows), 22)
        self.assertAlmostEqual(curve["frequency_hz"][0], 100, places=9)
        self.assertAlmostEqual(curve["frequency_hz"][-1], 10000, places=7)

    def test_describe_lists_every_kind_with_terminals_and_parameters(self):
        kinds = {k["kind"]: k for k in json.loads(run("describe", "--json").stdout)["kinds"]}
        self.assertEqual(set(kinds), {
            "resistor", "capacitor", "inductor", "potentiometer", "supply", "opamp", "limiter", "diode", "zener",
            "lamp", "thermistor", "jfet", "photocell", "multiplier", "servo"})
        self.assertEqual([t["name"] for t in kinds["opamp"]["terminals"]], ["plus", "minus", "out"])
        saturation = next(p for p in kinds["diode"]["parameters"] if p["name"] == "saturation_current")
        self.assertEqual((saturation["unit"], saturation["default"]), ("A", 4e-9))
        for kind in kinds.values():
            for parameter in kind["parameters"]:
                self.assertTrue(parameter["help"], parameter)


if __name__ == "__main__":
    unittest.main(argv=sys.argv)
