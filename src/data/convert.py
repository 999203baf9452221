#!/usr/bin/python3
"""Makes the built-in material data out of the reference tables.

    src/data/convert.py REFERENCE_FOLDER

reads dispersion_glass.csv, dispersion_glass_lzos_table.csv, dispersion_material.csv,
dispersion_material_table.csv and dn_dt_material.csv there, and writes beside itself

    glasses.csv    glasses of six makers, by formula
    tables.csv     LZOS glasses, as tables of indices
    materials.csv  crystals, semiconductors, infrared glasses, plastics, water
    sources.csv    id,text     the publications
    notes.csv      id,text     doubts about a source, refused values, approximations
    cautions.csv   id,text,who hazards, and who says so

The tables come from the refractiveindex.info database (M. N. Polyanskiy, Scientific Data 11, 94
(2024), doi 10.1038/s41597-023-02898-2), CC0 1.0; numbers stay digit for digit. Every decision that
changes, refuses or adds something is in this file, with its reason.
"""
import csv
import sys
from pathlib import Path

DATA_VERSION = "refractiveindex.info database, commit ff11b58 (2026-06-14), CC0 1.0"

HEADER = f"""\
# Data: {DATA_VERSION};
# M. N. Polyanskiy, Scientific Data 11, 94 (2024), doi 10.1038/s41597-023-02898-2. The data set is
# in the public domain, without warranty; glass names are their makers' trade marks.
# Made by convert.py, which holds every decision. An empty cell: the source does not say.
"""

COLUMNS = ["name", "maker", "status", "code", "form", "coefficients", "range_um", "index_in",
           "wavelength_in", "temperature_C", "thermal", "dn_dt_per_K", "dn_dt_relative_to",
           "expansion_per_K", "density_kg_m3", "axis", "cautions", "notes", "source"]

# ---- texts ------------------------------------------------------------------------------------

GLASS_SOURCES = {
    "schott-2017": "SCHOTT AG, optical glass data of 2017-01-20b",
    "ohara-2017": "OHARA, optical glass data of 2017-11-30",
    "hoya-2017": "HOYA, optical glass data of 2017-04-01",
    "hikari-2017": "NIKON/HIKARI, optical glass data of 2017-11",
    "cdgm-2022": "CDGM, optical glass data of 2022-06",
    "sumita-2017": "SUMITA, optical glass data of 2017-02-02",
    "boro33": "SCHOTT, BOROFLOAT 33, Optical Properties, June 2021 (Sellmeier fit by the data set)",
    "zerodur": "SCHOTT, Technical Information, Optical Properties of ZERODUR, November 2007",
    "lf7": "SCHOTT, LF7 glass data sheet (2006)",
    "lzos": "LZOS, tables of refractive indices",
}

NOTES = {
    # Glasses.
    "d0-only": "thermal coefficients without dispersion of dn/dT: good for focus, not for colour",
    "pole": "the listed thermal coefficients have a pole inside the range and were refused",
    "negative-tk": "the listed lambda_TK is negative; the thermal coefficients were refused",
    "code": "the listed six-digit code is that of the glass before moulding and was left out",
    "v-differs": "the maker's listed V_d differs by more than 0.1 from its own formula",
    "boro33": "n_d is listed to 3 decimals and differs by 5e-4 from the formula, V_d by 0.6",
    "no-density": "the listed density is a placeholder and was refused",
    "no-temperature": "temperature of the formula not stated; 20 C assumed",
    "moulded": "values after moulding",
    "slow-anneal": "annealed at 4 C/h",
    "fast-anneal": "annealed at 25 C/h",
    "expansion-0-25": "expansion is the mean of 0 to 25 C",
    "expansion-25-300": "expansion is the mean of 25 to 300 C",
    "expansion-20-300": "expansion is the mean of 20 to 300 C",
    "lzos": "a table without stated medium: index and wavelength taken as relative to air",
    "lzos-BK10": "the listed index at 1.1286 um is 6e-5 off its neighbours and was refused",
    "lzos-CTK8": "the listed index at 1.5296 um is 0.002 off its neighbours and was refused",
    "lzos-TK9": "the listed index at 0.8521 um is 6e-4 off its neighbours and was refused",
    # Where constants of materials come from.
    "crystran": "expansion and density: Crystran handbook (2023)",
    "crystran-dndt": "dn/dT, expansion and density: Crystran handbook (2023)",
    "lightpath": "dn/dT, expansion and density: maker's data sheet",
    "refused-dndt": "the vendor's dn/dT contradicts better data and was refused",
    # Thermal constants.
    "silica-dndt":
        "the vendor's dn/dT, 12.9e-6/K, was refused; for temperature use LITHOSIL-Q or NIFS-A",
    "caf2-dndt": "dn/dT at 0.5876 um, 20 to 25 C, in nitrogen (Daimon); -1.03e-5/K at 1 to 2 um",
    "caf2-vendor":
        "the vendor's dn/dT, -10.6e-6/K, lies between relative and absolute and was not used",
    "baf2-dndt": "dn/dT is a vendor's near room temperature; mean of 21 to 186 C -2.0e-5/K (Zheng)",
    "mgf2-dndt":
        "no dn/dT: the one known, a mean of 21 to 186 C, is no guide near room temperature",
    "water-dndt": "dn/dT at 0.5876 um, 19 to 24 C (Daimon)",
    "ge-dndt":
        "dn/dT suits the mean near 0 C; 3.93e-4 (-23..20 C), 4.19e-4/K (20..77 C) at 10 um (Li)",
    "si-dndt": "dn/dT at 4 um, mean of -23 to 77 C (Li), good to 2e-6/K at best",
    "gaas-dndt": "dn/dT at 10 um, mean of 27 to 97 C (Franta); the vendor's 147e-6/K was refused",
    "cdte-dndt": "dn/dT at 10 um, mean of -193 to 27 C (DeBell); the vendor's 50e-6/K was refused",
    "csbr-dndt": "the listed dn/dT has the wrong sign and was refused",
    "krs5-dndt": "the wavelength of dn/dT is not stated",
    "quartz-dndt": "dn/dT at 0.633 um; the vendor's para and perp read as e and o",
    "8-12": "dn/dT is for 8 to 12 um",
    "irg25": "the listed thermal coefficients repeat those of IRG24 and were refused",
    "irg24": "the listed density repeats that of IRG22 and was refused",
    # Materials.
    "nitrogen": "measured in nitrogen, which counts as air here",
    "silica-range":
        "the paper states the formula for 0.21 to 3.71 um; the data set's 6.7 um is not used",
    "krs5-same": "repeats Rodney 1956 within its digits: no independent measurement",
    "as2s3-same": "repeats Rodney 1958 within its digits: no independent measurement",
    "krs6-formula":
        "the formula is 0.13 low at 0.6 um; refused below 2 um, where it leaves the table",
    "si-pole": "pole at 1.1347 um, just below the range: never extrapolate",
    "diamond-ir":
        "from reflectance, about 0.01 low in the visible: for the infrared only, not for V",
    "zns-cubic": "cubic ZnS; the multispectral (water-clear) grade is not in the data set",
    "znse-marple": "an independent prism, 0.006 to 0.013 below Connolly",
    "znse-coating": "fit of a coating laboratory, about 0.015 below Connolly in the infrared",
    "cdte-kink":
        "the table has a kink at 4 to 5 um, where the index rises, and is 0.01 to 0.02 low",
    "amtir2": "said to be As40Se60, but 0.011 below the other glasses of that composition",
    "out": "out of production",
    "plastic": "approximate: one-term fit to indices of 3 decimals; V known to 5 to 10 %",
    "pmma-v": "the paper itself lists V_d 59.2; for PMMA prefer the plain entry (Beadie)",
    "pc-v": "the paper itself lists V_d 29.1",
    "ps-v": "the paper itself lists V_d 30.5",
    "nas-v": "the paper itself lists V_d 35.5",
    "zhang": "noisy: sheet material by transmission, every 0.02 um or more; no guide to V",
    "room": "temperature not stated or given as room temperature; 20 C assumed",
    "ordinary": "ordinary ray",
    "extraordinary": "extraordinary ray",
    "mgo-range":
        "a formula for the whole range; in the visible MgO (Stephens-vis) is more accurate",
}

CAUTIONS = {  # id: (text, who says so)
    "lead": ("contains lead: RoHS exemption 13(a), check its present state",
             "maker's comment in the data set; Delegated Directive (EU) 2017/1011"),
    "thallium": ("toxic: thallium halide, fatal if swallowed or inhaled as dust",
                 "americanelements.com, TlBr safety data: H300, H330, H373, H411"),
    "slightly-soluble": ("slightly soluble in water: keep dry",
                         "Oertel and Newmann, Appl. Spectrosc. 26, 562 (1972)"),
    "selenide": ("toxic: dust harmful if swallowed or inhaled; acid frees hydrogen selenide",
                 "ZnSe safety data sheet (vonjan-tech.de, 2024): H301, H331, H373, EUH032"),
    "zns": ("harmful dust: grinding and polishing",
            "handling note of a maker of CVD ZnS and ZnSe (Dow)"),
    "arsenic": ("toxic: arsenic; dust harmful if swallowed or inhaled, cancer",
                "alloy sheet 2015 (H301, H331, H373); ILO/ICSC card on arsenic"),
    "arsenic-sulphide": ("toxic: arsenic; attacked by alkali; makers differ on the solid glass",
                         "Amorphous Materials sheet; ILO/ICSC card on arsenic"),
    "chalcogenide": ("toxic: selenium or antimony; dust harmful if swallowed or inhaled",
                     "R. Williamson, Photonics Spectra (AMTIR); common practice"),
    "gallium-arsenide": ("toxic: arsenic; dust harmful if swallowed or inhaled",
                         "R. Williamson, Photonics Spectra"),
    "cadmium": ("toxic: cadmium; dust and fumes harmful, oxidises in moist air",
                "Lesker safety data sheet on CdTe (1990)"),
    "lead-fluoride": ("toxic: lead compound", "common practice, no source"),
    "barium": ("toxic: barium compound, slightly soluble", "common practice, no source"),
    "hygroscopic": ("soluble: takes up moisture, surface clouds in moist air",
                    "refractiveindex.info and Global Optics on NaCl; the others common practice"),
    "thermal-shock": ("thermal shock: cracks on sudden cooling or heating",
                      "lens maker's account of CaF2 (cloudynights.com); BaF2 common practice"),
    "opaque-hot": ("absorption rises with temperature: opaque above about 77 to 100 C",
                   "Crystran handbook and a supplier's page; they differ on the limit"),
}

# ---- glasses of six makers ----------------------------------------------------------------------

# The data set's words are shifted by one; `status` of the reference tables undoes that.
STATUS = {"preferred": "current", "standard": "current", "special": "on_request",
          "obsolete": "withdrawn", "": "unknown"}
MEDIUM = {("false",): "air", ("true",): "vacuum", ("",): "unknown"}
THERMAL = ["D0", "D1", "D2", "E0", "E1", "lambda_TK"]


def glass_source(row):
    by_text = {"LF7 glass data sheet": "lf7", "ZERODUR": "zerodur", "BOROFLOAT": "boro33"}
    for text, source in by_text.items():
        if text in row["source"]:
            return source
    return {"SCHOTT": "schott-2017", "OHARA": "ohara-2017", "HOYA": "hoya-2017",
            "HIKARI": "hikari-2017", "CDGM": "cdgm-2022", "SUMITA": "sumita-2017"}[row["maker"]]


def coefficients(row):
    values = [row.get(f"c{i}", "") for i in range(17)]
    while values and values[-1] == "":
        values.pop()
    return " ".join(values)


def thermal_coefficients(row, notes):
    """Formula A, or nothing where a cell of it is suspect."""
    values = [row[key] for key in THERMAL]
    if values[0] == "":
        return ""
    if "lambda_TK" in row["suspect"]:  # a slip of sign, or a pole inside the range
        notes.append("negative-tk" if float(row["lambda_TK"]) < 0 else "pole")
        return ""
    if all(float(v) == 0 for v in values[1:5]):
        notes.append("d0-only")
    return " ".join(values)


def glass_notes_of_comment(row, notes):
    comment = row["comment"]
    if "was replaced by" in comment:
        notes.append("replaced-" + comment.split()[-1])
        NOTES.setdefault(notes[-1], "replaced by " + comment.split()[-1])
    if "anneal rate:4" in comment:
        notes.append("slow-anneal")
    if "anneal rate:25" in comment:
        notes.append("fast-anneal")
    if "for 0 to 25" in comment:
        notes.append("expansion-0-25")
    if "for 25 to 300" in comment:
        notes.append("expansion-25-300")


def glass_cautions(row):
    comment = row["comment"].lower()
    if "lead containing" in comment or "leaded" in comment:
        return "lead"
    is_fluorite = row["family"] == "CaF" or row["name"] == "LITHOTEC-CAF2"
    return "thermal-shock" if is_fluorite else ""


def glass(row):
    suspect = row["suspect"].split()
    notes = []
    if row["name"].endswith("(M)"):
        notes.append("moulded")
    thermal = thermal_coefficients(row, notes)
    # dPgF is not carried at all: it is relative to each maker's own line, and P is computed.
    if "nd" in suspect:
        notes.append("boro33")
    elif "Vd" in suspect:
        notes.append("v-differs")
    if "glass_code" in suspect:
        notes.append("code")
    if "density_kg_m3" in suspect:
        notes.append("no-density")
    if row["temperature_C"] == "":
        notes.append("no-temperature")
    glass_notes_of_comment(row, notes)
    if row["name"] == "BOROFLOAT33":  # the only glass with no mean of -30 to 70 C but a wider one
        notes.append("expansion-20-300")
    return {
        "name": row["name"], "maker": row["maker"], "status": STATUS[row["status"]],
        "code": "" if "glass_code" in suspect else row["glass_code"], "form": row["formula"],
        "coefficients": coefficients(row),
        "range_um": row["lambda_min_um"] + " " + row["lambda_max_um"],
        "index_in": MEDIUM[(row["n_is_absolute"],)],
        "wavelength_in": MEDIUM[(row["wavelength_is_vacuum"],)],
        "temperature_C": row["temperature_C"], "thermal": thermal,
        "expansion_per_K": row["cte_-30_70"] or
                           (row["cte_20_300"] if row["name"] == "BOROFLOAT33" else ""),
        "density_kg_m3": "" if "density_kg_m3" in suspect else row["density_kg_m3"],
        "cautions": glass_cautions(row), "notes": " ".join(notes), "source": glass_source(row),
    }


# ---- LZOS tables --------------------------------------------------------------------------------

# Single indices that a smooth curve through all the others misses by 30 to 1000 times the usual
# rounding. (Two points also stand out of order; they are sorted.)
LZOS_REFUSED = {("BK10", "1.1286"), ("CTK8", "1.5296"), ("TK9", "0.8521")}


def lzos_glasses(rows):
    tables = {}
    for row in rows:
        if (row["name"], row["wavelength_um"]) not in LZOS_REFUSED:
            tables.setdefault(row["name"], []).append((row["wavelength_um"], row["n"]))
    refused = {name for name, _ in LZOS_REFUSED}
    for name, points in tables.items():
        points.sort(key=lambda point: float(point[0]))
        notes = ["lzos", "no-temperature"] + (["lzos-" + name] if name in refused else [])
        yield {"name": name, "maker": "LZOS", "status": "unknown", "form": "table",
               "coefficients": " ".join(x + " " + n for x, n in points),
               "range_um": points[0][0] + " " + points[-1][0], "index_in": "unknown",
               "wavelength_in": "unknown", "notes": " ".join(notes), "source": "lzos"}


# ---- other materials ----------------------------------------------------------------------------

# Infrared glasses of a maker go by the name that they are bought under.
TRADE_NAMES = {
    "IRG22": "SCHOTT", "IRG23": "SCHOTT", "IRG24": "SCHOTT", "IRG25": "SCHOTT", "IRG26": "SCHOTT",
    "IRG27": "SCHOTT", "IG2": "VITRON", "IG3": "VITRON", "IG4": "VITRON", "IG5": "VITRON",
    "IG6": "VITRON", "AMTIR-1": "AMI", "AMTIR-2": "AMI", "AMTIR-3": "AMI", "AMTIR-6": "AMI",
    "BD-2": "LIGHTPATH", "BD6": "LIGHTPATH", "BDNL4": "LIGHTPATH",
}
USUAL_NAMES = {"As40S60": "As2S3"}
OUT_OF_PRODUCTION = {"IRG23", "AMTIR-3"}  # the data set's cross-reference table


def material_name(row):
    """Plain name: the primary source, ordinary ray. Else "NAME (e)" or "NAME (ENTRY)"."""
    entry, name = row["entry"], USUAL_NAMES.get(row["material"], row["material"])
    if entry in TRADE_NAMES:
        return entry
    if row["role"] == "primary":
        return name + (" (e)" if row["axis"] == "e" else "")
    if "crystran" in row["dataset_path"]:
        entry = "Crystran"
    return f"{name} ({entry})"


MATERIAL_CAUTIONS = {
    "KRS-5": "thallium slightly-soluble", "KRS-6": "thallium", "ZnSe": "selenide", "ZnS": "zns",
    "Ge33As12Se55": "arsenic", "Ge10As40Se50": "arsenic", "As40Se60": "arsenic",
    "As40S60": "arsenic-sulphide", "Ge28Sb12Se60": "chalcogenide",
    "Ge30Sb13Se32Te25": "chalcogenide", "BDNL4": "chalcogenide", "GaAs": "gallium-arsenide",
    "CdTe": "cadmium", "PbF2": "lead-fluoride", "NaCl": "hygroscopic", "KBr": "hygroscopic",
    "KCl": "hygroscopic", "KI": "hygroscopic", "CsI": "hygroscopic", "CsBr": "hygroscopic",
    "CaF2": "thermal-shock", "BaF2": "thermal-shock barium", "Ge": "opaque-hot",
}

# (material, entry) or material: note ids, in the order in which they are shown.
MATERIAL_NOTES = {
    ("fused silica", "Malitson"): "silica-range",
    "fused silica": "silica-dndt crystran",
    "CaF2": "caf2-dndt caf2-vendor crystran", ("CaF2", "Daimon-20"): "nitrogen",
    ("CaF2", "Daimon-25"): "nitrogen", "BaF2": "baf2-dndt crystran-dndt", "MgF2": "mgf2-dndt",
    "KRS-5": "krs5-dndt crystran-dndt", ("KRS-5", "KRS5"): "krs5-same", "KRS-6": "crystran",
    ("KRS-6", "Hettner"): "krs6-formula", "CsBr": "csbr-dndt crystran", "CsI": "crystran-dndt",
    "quartz": "quartz-dndt crystran-dndt", ("MgO", "Stephens"): "mgo-range",
    "diamond": "crystran-dndt", ("diamond", "Phillip"): "diamond-ir",
    ("ZnS", "Debenham"): "zns-cubic", ("ZnSe", "Marple"): "znse-marple",
    ("ZnSe", "Amotchkina"): "znse-coating", "Ge": "ge-dndt crystran-dndt", "Si": "si-dndt",
    ("Si", "Salzberg"): "si-pole", "GaAs": "gaas-dndt crystran", "CdTe": "cdte-dndt crystran",
    ("CdTe", "CdTe"): "cdte-kink", ("Ge10As40Se50", "IRG24"): "irg24",
    ("Ge28Sb12Se60", "IRG25"): "irg25", ("Ge28Sb12Se60", "BD-2"): "lightpath",
    ("As40Se60", "AMTIR-2"): "amtir2", ("As40Se60", "BD6"): "8-12 lightpath",
    ("As40S60", "AMTIR-6"): "as2s3-same", "BDNL4": "8-12 lightpath", "GLS": "crystran-dndt",
    ("PMMA", "Sultanova"): "plastic pmma-v", ("polycarbonate", "Sultanova"): "plastic pc-v",
    ("polystyrene", "Sultanova"): "plastic ps-v", "SMMA NAS-21": "plastic nas-v",
    "COP Zeonex E48R": "plastic", "Optorez 1330": "plastic",
    ("polycarbonate", "Zhang"): "zhang", ("polystyrene", "Zhang"): "zhang", "water": "water-dndt",
}

# Ranges that are narrower than the data set's: the published one, and where a formula is refused.
MATERIAL_RANGES = {("fused silica", "Malitson"): "0.21 3.71", ("KRS-6", "Hettner"): "2 24"}

# dn/dT from dn_dt_material.csv, where the vendor's constant is suspect or absent:
# material: (wavelength in um, lower and upper temperature, relative to). The two temperatures may
# span two rows. MgF2's only value is a mean of 21 to 186 C and is left out (note mgf2-dndt).
DERIVED_DN_DT = {
    "CaF2": ("0.5875618", 20, 25, "air"),  # both tables were measured in nitrogen
    "Si": ("4", -23, 77, "unknown"),
    "GaAs": ("10.0031", 26.85, 96.85, "unknown"),
    "CdTe": ("10", -193.15, 26.85, "unknown"),
    "water": ("0.5875618", 19, 24, "vacuum"),
}


def derived_dn_dt(material, rows):
    wavelength, low, high, relative_to = DERIVED_DN_DT[material]
    here = [r for r in rows if r["material"] == material and r["wavelength_um"] == wavelength]
    first = next(r for r in here if float(r["t1_C"]) == low)
    last = next(r for r in here if float(r["t2_C"]) == high)
    if first is last:
        return first["dn_dT"], relative_to
    slope = (float(last["n2"]) - float(first["n1"])) / (high - low)
    return f"{slope:.3e}", relative_to


def material_dn_dt(row, derived):
    if row["material"] in DERIVED_DN_DT:
        return derived_dn_dt(row["material"], derived)
    if row["dn_dT"] and "dn_dT" not in row["suspect"].split():
        return row["dn_dT"], "unknown"
    return "", ""


def composition_notes(row):
    """Of glasses that go by a trade name; AMTIR-2 has a note of its own."""
    composition = row["material"]
    if row["entry"] not in TRADE_NAMES or row["entry"] in (composition, "AMTIR-2"):
        return []
    NOTES.setdefault(composition, "composition " + composition)
    return [composition]


def material_notes(row):
    """Doubts, refusals, assumptions. An unknown medium has no note here: the index says so when
    it matters."""
    key = (row["material"], row["entry"])
    notes = composition_notes(row)
    if row["axis"] != "isotropic":
        notes.append("ordinary" if row["axis"] == "o" else "extraordinary")
    notes += MATERIAL_NOTES.get(key, "").split()
    notes += MATERIAL_NOTES.get(row["material"], "").split()
    if row["entry"] in OUT_OF_PRODUCTION:
        notes.append("out")
    if row["temperature_C"] == "":
        notes.append("room")
    return " ".join(notes)


def material_thermal(row):
    if row["D0"] == "" or "D0" in row["suspect"].split():
        return ""
    return " ".join(row[key] for key in THERMAL)


def material_source(row, sources):
    if "crystran" in row["dataset_path"]:
        source, text = "crystran-2023", ("Crystran Ltd., The Crystran handbook of infra-red and "
                                         "ultra-violet optical materials (5th edition, 2023)")
    else:
        source = (row["material"] + "-" + row["entry"]).lower().replace(" ", "-")
        text = row["source"].replace("<j>", "").replace("</j>", "").replace("\u2013", "-")
        text = text.replace("Aptil", "April")  # slip in the data set
        if row["doi"]:
            text += "; doi " + ", ".join(row["doi"].split())
    sources[source] = text
    return source


def material(row, tables, derived, sources):
    key = (row["material"], row["entry"])
    dn_dt, dn_dt_relative_to = material_dn_dt(row, derived)
    nitrogen = key in {("CaF2", "Daimon-20"), ("CaF2", "Daimon-25")}
    table = row["formula"] == "table"
    return {
        "name": material_name(row), "maker": TRADE_NAMES.get(row["entry"], ""),
        "status": "withdrawn" if row["entry"] in OUT_OF_PRODUCTION else "unknown",
        "form": row["formula"],
        "coefficients": " ".join(tables[key]) if table else coefficients(row),
        "range_um": MATERIAL_RANGES.get(key, row["lambda_min_um"] + " " + row["lambda_max_um"]),
        "index_in": "air" if nitrogen else MEDIUM[(row["n_is_absolute"],)],
        "wavelength_in": MEDIUM[(row["wavelength_is_vacuum"],)],
        "temperature_C": row["temperature_C"], "thermal": material_thermal(row),
        "dn_dt_per_K": dn_dt, "dn_dt_relative_to": dn_dt_relative_to,
        "expansion_per_K": row["cte"],
        "density_kg_m3": "" if "density_kg_m3" in row["suspect"] else row["density_kg_m3"],
        "axis": {"o": "ordinary", "e": "extraordinary"}.get(row["axis"], ""),
        "cautions": MATERIAL_CAUTIONS.get(row["material"], ""), "notes": material_notes(row),
        "source": material_source(row, sources),
    }


# ---- files --------------------------------------------------------------------------------------


def read(folder, name):
    with open(folder / name, encoding="utf-8", newline="") as file:
        return list(csv.DictReader(file))


def write_records(path, records):
    with open(path, "w", encoding="utf-8", newline="") as file:
        file.write(HEADER + ",".join(COLUMNS) + "\n")
        for record in records:
            cells = [record.get(column, "") for column in COLUMNS]
            assert not any("," in cell or '"' in cell or "\n" in cell for cell in cells), cells
            file.write(",".join(cells) + "\n")


def write_texts(path, columns, rows):
    """An id, then texts in quotes; the loader relies on that and on no quote inside."""
    with open(path, "w", encoding="utf-8", newline="") as file:
        file.write(HEADER + columns + "\n")
        for key, *texts in rows:
            cells = ['"' + " ".join(text.replace('"', "'").split()) + '"' for text in texts]
            file.write(",".join([key] + cells) + "\n")


def main():
    folder, here = Path(sys.argv[1]), Path(__file__).parent
    glasses = [glass(row) for row in read(folder, "dispersion_glass.csv")]
    tables = list(lzos_glasses(read(folder, "dispersion_glass_lzos_table.csv")))
    points, derived, sources = {}, read(folder, "dn_dt_material.csv"), dict(GLASS_SOURCES)
    for row in read(folder, "dispersion_material_table.csv"):
        key = (row["material"], row["entry"])
        points.setdefault(key, []).extend([row["wavelength_um"], row["n"]])
    materials = [material(row, points, derived, sources)
                 for row in read(folder, "dispersion_material.csv")]
    write_records(here / "glasses.csv", glasses)
    write_records(here / "tables.csv", tables)
    write_records(here / "materials.csv", materials)
    write_texts(here / "sources.csv", "id,text", sources.items())
    used = {i for r in glasses + tables + materials for i in r["notes"].split()}
    write_texts(here / "notes.csv", "id,text", [(k, v) for k, v in NOTES.items() if k in used])
    write_texts(here / "cautions.csv", "id,text,who",
                [(key, *texts) for key, texts in CAUTIONS.items()])


if __name__ == "__main__":
    main()
