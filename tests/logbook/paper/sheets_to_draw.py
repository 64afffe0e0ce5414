"""Invented sheets for the tests of paper: one with a bit of everything, of as many cylinders as a test cares about."""

from datetime import UTC, datetime

AT = datetime(2026, 5, 2, 9, 30, tzinfo=UTC)


def lash(station: str, value: float, verdict: str, words: str, **more: object) -> dict[str, object]:
    return {
        "station": station, "typed": f"{value:.2f} mm", "value": f"{value:.3f} ± 0.010 mm", "limits": "0.25 to 0.35 mm",
        "source": "limit sheet 3, line 1: maker's manual, edition 2, page 41", "verdict": verdict, "words": words,
        "ruler": {"lower": 0.25, "upper": 0.35, "guard_band": 0.008,
                  "marks": [{"value": value, "expanded": 0.01, "verdict": verdict, "role": "now"},
                            {"value": 0.3, "expanded": None, "verdict": "within", "role": "last"}],
                  "label": f"{station}: {value:.3f} mm, {words}; limits 0.25 to 0.35 mm"},
        **more,
    }  # fmt: skip


def job_sheet(cylinders: int = 2, **more: object) -> dict[str, object]:
    """A job sheet with one of everything; the first three stations take turns at being beyond, too close, within."""
    answers = [(0.18, "beyond", "beyond"), (0.255, "too_close", "too close to call"), (0.31, "within", "within")]
    rows = [
        lash(f"Cylinder {cylinder} {side}", *answers[place % 3])
        for cylinder in range(1, cylinders + 1)
        for place, side in enumerate(("intake", "exhaust"))
    ]
    rows[0] |= {"decision": "put right", "notes": ["was 0.30 mm as left on 2025-11-04"]}
    rows.append({"station": "Cylinder 9 intake", "value": "not measured: seized"})
    rows.append(lash("Cylinder 9 exhaust", 0.3, "within", "within", is_struck=True, notes=["struck: wrong cylinder"]))
    return {
        "shop": "Reed Lake workshop", "number": 118, "title": "Valve lash, 500 h", "engine": "North pump",
        "engine_facts": [{"name": "layout", "value": "inline, 4 cylinders"}, {"name": "bore", "value": "96 mm"}],
        "facts": [{"name": "engine hours", "value": "4210"}, {"name": "decision rule", "value": "guarded, 95 %"}],
        "notes": ["Not checked by a second person."],
        "passes": [{
            "title": "Valve lash", "phase": "as found", "gauge": "FG-2 feeler gauge",
            "calibration": "C-118, 2026-03-01, U = 0.008 mm (k = 2), due 2027-03-01",
            "facts": [{"name": "measured by", "value": "Bo Lind"}, {"name": "state", "value": "cold"}],
            "complaints": ["Gauge FG-2 was past due."], "rows": rows,
            "derived": [{"station": "Change", "typed": "cylinder 1 intake", "value": "−0.120 ± 0.014 mm"}],
        }],
        "acts": [{"station": "Cylinder 1 intake", "what": "screw loosened by 0.12 turn", "by": "Bo Lind", "when": "10:05"}],
        "parts": ["cover gasket, 1"], "open": ["cover: waits for its gasket"],
        "decisions": [{"finding": "Cylinder 1 intake", "decision": "put right", "by": "Ada Ek", "when": "2026-05-02"}],
        "concessions": [{"finding": "Cylinder 2 intake", "conditions": "at half load", "agreed_by": "Ole Moe",
                         "until": "2026-08-01"}],
        "signatures": [{"role": "decided", "name": "Ada Ek", "when": "2026-05-02 11:00", "fingerprint": "ab" * 32}],
        "ink": ["for the owner", "witness"], **more,
    }  # fmt: skip


def work_order() -> dict[str, object]:
    return {
        "shop": "Reed Lake workshop", "number": 118, "title": "Valve lash and compression", "engine": "North pump",
        "cautions": [{"signal": "DANGER", "text": "A hot engine can fire when it is barred: fuel shut off and vented."}],
        "tasks": [
            {"title": "Valve lash", "state": "turned by hand: isolated", "locks": ["main switch", "start air valve"],
             "cautions": [{"signal": "WARNING", "text": "Feeler out, hands clear, helper answers."}],
             "facts": [{"name": "gauge", "value": "FG-2"}]},
            {"title": "Compression", "state": "cranked: ignition and fuel off", "locks": ["fuel rack"]},
        ],
        "closing": ["covers on", "locknuts tight", "bar out"], "ink": ["opened by"],
    }  # fmt: skip


def blank_sheet() -> dict[str, object]:
    def station(name: str) -> dict[str, str]:
        return {"station": name, "limits": "0.25 to 0.35 mm", "setting": "0.30", "last": "0.30 mm"}

    return {
        "shop": "Reed Lake workshop", "number": 118, "title": "Valve lash, 500 h", "engine": "North pump",
        "task": "Valve lash", "unit": "mm", "columns": ["as found", "again", "act", "as left"],
        "cautions": [{"signal": "WARNING", "text": "Valve springs are under load."}],
        "blanks": ["gauge", "engine hours", "part temperature", "measured by"],
        "stops": [
            {"mark": "TDC 1 firing", "angle": "0°", "stations": [station("1 intake"), station("1 exhaust"), station("2 intake"),
                                                                station("3 exhaust")]},
            {"mark": "TDC 4 firing", "angle": "360°", "cautions": [{"signal": "WARNING", "text": "Feeler out, hands clear."}],
             "stations": [station("4 intake"), station("4 exhaust"), station("3 intake"), station("2 exhaust")]},
        ],
        "ink": ["measured by"],
    }  # fmt: skip
