"""A second verifier, written from the format's description alone, in another language.

It shares no code with the project: JSON, SHA-256 and base64 come from Python's standard library, Ed25519 and ECDSA
signatures and RFC 3161 tokens are judged by the openssl command, packets are opened by poppler's pdfdetach, exports by zipfile. A packet's pages count by the
one signature in the PDF (ISO 32000-2, 12.8), which openssl judges too.

    python3 independent_verifier.py record.json|packet.pdf|export.zip [--tsa-roots roots.pem]

Exit status: 0 unchanged, 1 altered, 2 unreadable. Problems go to standard output, one a line; with roots, then each
entry's proven time.
"""
import base64
import datetime
import hashlib
import json
import os
import re
import subprocess
import sys
import tempfile
import zipfile

problems = []


def problem(where, what):
    problems.append(f"{where}: {what}")


def canonical(value):
    """RFC 8785 for the values this format has: strings, integers, null, booleans, arrays, objects."""
    if value is None or value is True or value is False:
        return json.dumps(value)
    if isinstance(value, int):
        return str(value)
    if isinstance(value, str):
        return json.dumps(value, ensure_ascii=False)
    if isinstance(value, list):
        return "[" + ",".join(canonical(v) for v in value) + "]"
    if isinstance(value, dict):
        names = sorted(value, key=lambda name: name.encode("utf-16-be", "surrogatepass"))
        return "{" + ",".join(canonical(n) + ":" + canonical(value[n]) for n in names) + "}"
    raise ValueError("a number that is not an integer")


def refuse_float(text):
    raise ValueError(f"{text} is not an integer")


def parse(text):
    return json.loads(text, parse_float=refuse_float)


def sha256(data):
    return hashlib.sha256(data).digest()


def root_of(leaf_hashes):
    """RFC 6962 section 2.1 over leaf hashes."""
    n = len(leaf_hashes)
    if n == 0:
        return sha256(b"")
    if n == 1:
        return leaf_hashes[0]
    k = 1
    while k * 2 < n:
        k *= 2
    return sha256(b"\x01" + root_of(leaf_hashes[:k]) + root_of(leaf_hashes[k:]))


def b64url(text):
    if "=" in text or re.search(r"[^A-Za-z0-9_-]", text):
        raise ValueError("not base64url")
    data = base64.urlsafe_b64decode(text + "=" * (-len(text) % 4))
    if base64.urlsafe_b64encode(data).decode().rstrip("=") != text:
        raise ValueError("base64url with stray bits")
    return data


def b64(text):
    data = base64.b64decode(text, validate=True)
    if base64.b64encode(data).decode() != text:
        raise ValueError("base64 with stray bits")
    return data


def openssl_verifies(public_key, message, signature):
    # SubjectPublicKeyInfo of an Ed25519 key (RFC 8410) is a fixed header and the 32 bytes.
    der = bytes.fromhex("302a300506032b6570032100") + public_key
    with tempfile.TemporaryDirectory() as folder:
        def put(name, data):
            path = os.path.join(folder, name)
            with open(path, "wb") as file:
                file.write(data)
            return path

        return subprocess.run(
            ["openssl", "pkeyutl", "-verify", "-pubin", "-keyform", "DER", "-inkey", put("key", der), "-rawin",
             "-in", put("message", message), "-sigfile", put("signature", signature)],
            capture_output=True,
        ).returncode == 0


def parse_key(text):
    match = re.fullmatch(r"([a-z0-9][a-z0-9.:-]{0,99})\+([0-9a-f]{8})\+(.+)", text)
    if not match:
        raise ValueError("a verifier key that does not parse")
    data = b64(match[3])
    name, public_key = match[1], data[1:]
    if data[0] != 1 or len(public_key) != 32:
        raise ValueError("a verifier key of another kind")
    key_hash = sha256(name.encode() + b"\x0a\x01" + public_key)[:4]
    if key_hash.hex() != match[2]:
        raise ValueError("a verifier key whose hash is not its own")
    return name, key_hash, public_key


def check_note(where, note, key):
    """A C2SP signed note. Returns its text lines, or None after naming the problem."""
    name, key_hash, public_key = key
    head, separator, signatures = note.partition("\n\n")
    lines = signatures.split("\n")
    if not separator or lines[-1] != "" or len(lines) != 2:
        problem(where, "not a signed note with one signature line")
        return None
    match = re.fullmatch(r"\u2014 (\S+) (\S+)", lines[0])
    if not match:
        problem(where, "a signature line that does not parse")
        return None
    try:
        signed = b64(match[2])
    except ValueError as error:
        problem(where, f"signature: {error}")
        return None
    if match[1] != name or signed[:4] != key_hash:
        problem(where, "signed by a key that is not the file's first")
        return None
    if not openssl_verifies(public_key, (head + "\n").encode(), signed[4:]):
        problem(where, "openssl refuses the signature")
        return None
    return head.split("\n")


def check_checkpoint(where, note, key, log, size, hashes):
    """Whether it is signed and belongs to these lines."""
    before = len(problems)
    lines = check_note(where, note, key)
    want = [f"{log['origin']}/{log['id']}", str(size), base64.b64encode(root_of(hashes[:size])).decode()]
    if lines is not None and lines != want:
        problem(where, f"says {lines}, recomputed {want}")
    return len(problems) == before


PARTS = ["attachments", "author", "body", "contact", "identity", "notes", "prices", "supplier"]
MACHINE_KINDS = set("opening service terms reading addendum strike countersignature key signature handover".split())
SHELF_KINDS = set("opening purchase disposal correction strike handover".split())
LEAF_MEMBERS = {"format", "log", "seq", "previous", "kind", "sealedAt", "refersTo", "parts"}


def check_leaf(where, text, log, seq, previous, earlier):
    try:
        leaf = parse(text)
        if canonical(leaf) != text:
            problem(where, "the leaf is not its own canonical form")
    except (ValueError, RecursionError) as error:
        problem(where, f"the leaf does not parse: {error}")
        return None
    if set(leaf) != LEAF_MEMBERS or leaf["format"] != "witnessmark/leaf/1":
        problem(where, "members")
        return None
    if leaf["log"] != log["id"] or leaf["seq"] != seq or leaf["previous"] != previous:
        problem(where, "log, seq or previous")
    if leaf["kind"] not in (MACHINE_KINDS if log["subject"] == "machine" else SHELF_KINDS):
        problem(where, f"kind {leaf['kind']}")
    if (leaf["kind"] == "opening") != (seq == 0):
        problem(where, "an opening is entry 0 and entry 0 an opening")
    if not re.fullmatch(r"\d{4}-\d\d-\d\dT\d\d:\d\d:\d\d\.\d{3}Z", leaf["sealedAt"]):
        problem(where, "sealedAt")
    elif earlier and leaf["sealedAt"] < earlier[-1]["sealedAt"]:
        problem(where, "sealed before the line above it")
    refers = leaf["refersTo"]
    if refers is not None:
        if set(refers) != {"seq", "leafHash"} or refers["seq"] >= seq or earlier[refers["seq"]]["hash"] != refers["leafHash"]:
            problem(where, "refersTo")
    names = [part["name"] for part in leaf["parts"]]
    if names != sorted(set(names)) or any(name not in PARTS for name in names):
        problem(where, "parts")
    return leaf


def check_parts(where, leaf, disclosures):
    digests = {part["name"]: part["digest"] for part in leaf["parts"]}
    opened = {}
    for text in disclosures:
        try:
            raw = b64url(text).decode("utf-8")
            salt, name, value = parse(raw)
            if canonical([salt, name, value]) != raw:
                problem(where, f"part {name} is not its own canonical form")
            if not re.fullmatch(r"[A-Za-z0-9_-]{22}", salt):
                problem(where, f"salt of {name}")
        except (ValueError, TypeError) as error:
            problem(where, f"a part that does not parse: {error}")
            continue
        digest = base64.urlsafe_b64encode(sha256(text.encode("ascii"))).decode().rstrip("=")
        if digests.get(name) != digest or name in opened:
            problem(where, f"part {name} is not what the leaf names, or is opened twice")
        opened[name] = value
    return opened


def openssl_verifies_es256(public_key, message, signature):
    """ECDSA over P-256 with SHA-256; the key is its SubjectPublicKeyInfo."""
    with tempfile.TemporaryDirectory() as folder:
        paths = {}
        for name, data in [("key.der", public_key), ("message", message), ("signature", signature)]:
            paths[name] = os.path.join(folder, name)
            with open(paths[name], "wb") as file:
                file.write(data)
        pem = subprocess.run(["openssl", "pkey", "-pubin", "-inform", "DER", "-in", paths["key.der"], "-pubcheck"],
                             capture_output=True)
        if pem.returncode != 0:
            return False
        paths["key.pem"] = os.path.join(folder, "key.pem")
        with open(paths["key.pem"], "wb") as file:
            file.write(pem.stdout[pem.stdout.index(b"-----BEGIN"):])
        return subprocess.run(
            ["openssl", "dgst", "-sha256", "-verify", paths["key.pem"], "-signature", paths["signature"],
             paths["message"]], capture_output=True).returncode == 0


def once(pairs):
    """For json.loads: an object in which no name stands twice."""
    if len({name for name, _ in pairs}) != len(pairs):
        raise ValueError("a name that stands twice")
    return dict(pairs)


def relying_parties(origin):
    """The host of an origin and its parent domains of two labels or more, if the origin may ask for signatures."""
    match = re.fullmatch(r"(https?)://([a-z0-9_.-]+|\[[0-9a-f:]+\])(:[1-9][0-9]{0,4})?", origin)
    if not match:
        raise ValueError("origin")
    host = match[2]
    loopback = re.fullmatch(r"localhost|.+\.localhost|127(\.[0-9]{1,3}){3}|\[::1\]", host)
    if match[1] == "http" and not loopback:
        raise ValueError("origin over plain http")
    if re.fullmatch(r"\[.*\]|[0-9.]+", host):
        return [host]
    labels = host.split(".")
    return [host] + [".".join(labels[i:]) for i in range(1, len(labels) - 1)]


SPKI_P256 = bytes.fromhex("3059301306072a8648ce3d020106082a8648ce3d03010703420004")


def check_statement(signature, log, refers, body):
    """W3C WebAuthn Level 2 section 7.2, without the server that asked. Returns the key, or raises ValueError."""
    if not isinstance(signature, dict) or set(signature) != {
            "publicKey", "authenticatorData", "clientDataJSON", "signature"}:
        raise ValueError("members of the signature")
    if any(not isinstance(value, str) for value in signature.values()):
        raise ValueError("members of the signature")
    statement = {"log": log, "refersTo": refers, "body": body}
    challenge = sha256(b"witnessmark/statement/1\n" + canonical(statement).encode())
    client = b64url(signature["clientDataJSON"])
    data = json.loads(client.decode("utf-8"), object_pairs_hook=once)
    if not isinstance(data, dict) or data.get("type") != "webauthn.get":
        raise ValueError("type")
    if data.get("challenge") != base64.urlsafe_b64encode(challenge).decode().rstrip("="):
        raise ValueError("challenge")
    if data.get("crossOrigin", False) is not False or "topOrigin" in data:
        raise ValueError("crossOrigin")
    names = relying_parties(data["origin"] if isinstance(data.get("origin"), str) else "")
    authenticator = b64url(signature["authenticatorData"])
    flags = authenticator[32] if len(authenticator) >= 37 else 0
    if len(authenticator) < 37 or (len(authenticator) > 37) != bool(flags & 0xC0):
        raise ValueError("form of the authenticator data")
    if authenticator[:32] not in [sha256(name.encode()) for name in names]:
        raise ValueError("rpIdHash")
    if flags & 0x05 != 0x05:
        raise ValueError("user present and verified")
    key = b64url(signature["publicKey"])
    if len(key) != 91 or not key.startswith(SPKI_P256):
        raise ValueError("not a P-256 key")
    if not openssl_verifies_es256(key, authenticator + sha256(client), b64url(signature["signature"])):
        raise ValueError("openssl refuses the signature")
    return signature["publicKey"]


def is_struck(seq, until, lines):
    return any(
        line["kind"] == "strike" and seq < line["seq"] < until and line["refersTo"] and line["refersTo"]["seq"] == seq
        and not is_struck(line["seq"], until, lines) for line in lines)


def check_statements(log, lines):
    """Signatures made outside the server. `lines` are the leaves of one log with what is opened of each."""
    for line in lines:
        body = line["opened"].get("body")
        where = f"{log['subject']} {log['id'][:8]} entry {line['seq']}"
        if line["kind"] == "signature" and body is not None:
            signature, unsigned = body, {}
        elif line["kind"] == "countersignature" and body is not None and "signature" in body:
            signature, unsigned = body["signature"], {n: v for n, v in body.items() if n != "signature"}
        else:
            continue
        try:
            if line["refersTo"] is None:
                raise ValueError("names no entry")
            if line["kind"] == "countersignature" and not unsigned:
                raise ValueError("says nothing")
            key = check_statement(signature, log["id"], line["refersTo"], unsigned)
            keys = [other for other in lines if other["kind"] == "key" and other["seq"] < line["seq"]
                    and not is_struck(other["seq"], line["seq"], lines)]
            bodies = [other["opened"].get("body") for other in keys]
            named = [b for b in bodies if b is not None and set(b) == {"person", "publicKey"} and b["publicKey"] == key]
            if not named and None in bodies:
                continue
            if not named:
                raise ValueError("no key entry names the key")
            author = line["opened"].get("author")
            if author is not None and author.get("person") != named[-1]["person"]:
                raise ValueError("the key of somebody else")
        except (ValueError, TypeError) as error:
            problem(where, f"signature made outside the server: {error}")


OWN_AUTHORITY = "Witnessmark test authority (not independent)"
CLOCK_TOLERANCE = 300


def time_of(token_path):
    """genTime as openssl prints it: (seconds since 1970, ISO with milliseconds)."""
    text = subprocess.run(["openssl", "ts", "-reply", "-in", token_path, "-token_in", "-text"], capture_output=True,
                          text=True, check=True).stdout
    printed = re.search(r"^Time stamp: (\w{3} +\d+ \d\d:\d\d:\d\d)(?:\.(\d+))? (\d{4}) GMT$", text, re.M)
    if not printed:
        raise ValueError("a token without a time")
    moment = datetime.datetime.strptime(f"{printed[1]} {printed[3]} +0000", "%b %d %H:%M:%S %Y %z")
    thousandths = (printed[2] or "").ljust(3, "0")[:3]
    return moment.timestamp(), moment.strftime("%Y-%m-%dT%H:%M:%S.") + thousandths + "Z"


SHA256_IMPRINTS = [bytes.fromhex("3031300d060960864801650304020105000420"), bytes.fromhex("302f300b0609608648016503040201" "0420")]


def check_token(where, token, note, roots):
    """Names what does not hold of the token itself; returns its time if a root that was brought vouches for it."""
    with tempfile.TemporaryDirectory() as folder:
        token_path, note_path, signer, content = (os.path.join(folder, name) for name in ("token", "note", "signer", "content"))
        with open(token_path, "wb") as file:
            file.write(b64(token))
        with open(note_path, "wb") as file:
            file.write(note.encode())

        def openssl(*arguments):
            return subprocess.run(["openssl", *arguments], capture_output=True, text=True, check=True).stdout

        try:
            # The signature and what it is over; -noverify: not the chain. The signers' certificates are written out.
            openssl("cms", "-verify", "-noverify", "-binary", "-inform", "DER", "-in", token_path, "-signer", signer,
                    "-out", content)
            seconds, time = time_of(token_path)
            at = ["-attime", str(int(seconds))]
            # RFC 3161 2.3: valid then, and critically for time stamps alone.
            openssl("verify", "-purpose", "timestampsign", "-partial_chain", "-trusted", signer, *at, signer)
            if open(signer).read().count("BEGIN CERTIFICATE") != 1:
                raise ValueError("not exactly one signer")
            openssl("x509", "-in", signer, "-outform", "DER", "-out", signer + ".der")
            der = open(signer + ".der", "rb").read()
            # RFC 5816 and RFC 2634: the signer's certificate is named by its hash.
            names = [b"\x04" + bytes([len(hash)]) + hash for hash in (sha256(der), hashlib.sha1(der).digest(),
                     hashlib.sha384(der).digest(), hashlib.sha512(der).digest())]
            if not any(name in b64(token) for name in names):
                raise ValueError("the token names another certificate")
            if not any(start + sha256(note.encode()) in open(content, "rb").read() for start in SHA256_IMPRINTS):
                raise ValueError("the token is over something else")
            if seconds > datetime.datetime.now().timestamp() + CLOCK_TOLERANCE:
                raise ValueError(f"a token from the future, {time}")
            carried = openssl("pkcs7", "-inform", "DER", "-in", token_path, "-print_certs")
        except (ValueError, subprocess.CalledProcessError) as error:
            problem(where, f"token: {getattr(error, 'stderr', None) or error}")
            return None
        if roots is None or re.search(r"^(subject|issuer)=.*CN ?= ?" + re.escape(OWN_AUTHORITY) + r"$", carried, re.M):
            return None
        try:
            openssl("ts", "-verify", "-data", note_path, "-in", token_path, "-token_in", "-CAfile", roots, *at)
            return time
        except subprocess.CalledProcessError:
            return None


def check_draws(where, body, purchases):
    for task in body.get("tasks", []):
        for use in task.get("fills", []) + task.get("parts", []):
            for draw in use.get("draws", []):
                wanted = draw["purchase"]
                found = purchases.get((wanted["log"], wanted["seq"]))
                if found is None or found["hash"] != wanted["leafHash"]:
                    problem(where, "draws from a purchase that is not in the file")


def verify(text, roots):
    bundle = parse(text)
    if not isinstance(bundle, dict) or bundle.get("format") != "witnessmark/bundle/1":
        raise ValueError("not a bundle")
    if canonical(bundle) != text:
        problem("bundle", "is not its own canonical form")
    expected = {"format", "madeAt", "purpose", "number", "verifierKeys", "packetCertificate", "logs", "files", "signature"}
    if set(bundle) != expected:
        problem("bundle", "members")
    key = parse_key(bundle["verifierKeys"][0])
    unsigned = {name: value for name, value in bundle.items() if name != "signature"}
    digest = base64.b64encode(sha256(canonical(unsigned).encode())).decode()
    lines = check_note("bundle", bundle["signature"], key)
    if lines is not None and lines != ["witnessmark/bundle/1", bundle["madeAt"], digest]:
        problem("bundle", "the signature is over something else")

    purchases, services, named_files, entries, proven = {}, [], {}, 0, []
    for log in bundle["logs"]:
        hashes, leaves, previous, stamps = [], [], None, []
        for seq, entry in enumerate(log["entries"]):
            where = f"{log['subject']} {log['id'][:8]} entry {seq}"
            leaf = check_leaf(where, entry["leaf"], log, seq, previous, leaves)
            digest = sha256(b"\x00" + entry["leaf"].encode())
            hashes.append(digest)
            previous = digest.hex()
            entries += 1
            if leaf is None:
                leaves.append({"sealedAt": "", "hash": previous})
                continue
            leaf["hash"] = previous
            leaves.append(leaf)
            opened = leaf["opened"] = check_parts(where, leaf, entry["parts"])
            for attachment in opened.get("attachments", []):
                for file in [attachment] + ([attachment["copy"]] if "copy" in attachment else []):
                    named_files[file["sha256"]] = (file["bytes"], file["mediaType"])
            if leaf["kind"] == "purchase":
                purchases[(log["id"], seq)] = leaf
            if leaf["kind"] == "service" and "body" in opened:
                services.append((where, opened["body"]))
            is_sealed = check_checkpoint(where + " seal", entry["seal"]["checkpoint"], key, log, seq + 1, hashes)
            for token in entry["seal"]["tokens"]:
                time = check_token(where, token, entry["seal"]["checkpoint"], roots)
                if time is not None and is_sealed:
                    stamps.append((seq, time))
        for seq in range(len(log["entries"])):
            proven.append((log["id"], seq, min((time for at, time in stamps if at >= seq), default=None)))
        check_statements(log, [leaf for leaf in leaves if "opened" in leaf])
        check_checkpoint(f"log {log['id'][:8]}", log["checkpoint"], key, log, len(log["entries"]), hashes)
    for where, body in services:
        check_draws(where, body, purchases)
    for file in bundle["files"]:
        named = named_files.get(file["sha256"])
        # A copy made later need not be named itself, but what it was made from must be; and a name must fit.
        is_made_later = file["derivedFrom"] is not None
        if is_made_later and file["derivedFrom"] not in named_files:
            problem(f"file {file['name']}", "no opened part names what it was made from")
        if named != (file["bytes"], file["mediaType"]) and not (is_made_later and named is None):
            problem(f"file {file['name']}", "no opened part names it so")
    return entries, [file for file in bundle["files"] if file["included"]], bundle["packetCertificate"], proven


def der_length(data):
    """Tag and length included, of the first element."""
    if data[1] < 0x80:
        return 2 + data[1]
    count = data[1] & 0x7F
    return 2 + count + int.from_bytes(data[2:2 + count], "big")


def check_pages(data, certificate, folder):
    """The signature of the certificate that record.json names must hold over every byte but the value of Contents."""
    ranges = re.findall(rb"/ByteRange\s*\[\s*(\d+)\s+(\d+)\s+(\d+)\s+(\d+)\s*\]", data)
    if len(ranges) != 1 or data.count(b"/ByteRange") != 1:
        return problem("pages", f"{len(ranges)} signatures, not one")
    zero, start, end, length = map(int, ranges[0])
    hole = data[start:end]
    if zero != 0 or end + length != len(data) or not re.search(rb"/Contents\s*$", data[:start]):
        return problem("pages", "the signature does not cover the whole file but its own value")
    if not re.fullmatch(rb"<(?:[0-9A-Fa-f]{2})+>", hole):
        return problem("pages", "what is not signed is not one hexadecimal string")
    signature = bytes.fromhex(hole[1:-1].decode())
    size = der_length(signature)
    if any(signature[size:]):
        return problem("pages", "something stands behind the signature where nothing is signed")

    def put(name, content=None):
        path = os.path.join(folder, name)
        if content is not None:
            with open(path, "wb") as file:
                file.write(content)
        return path

    outcome = subprocess.run(
        ["openssl", "cms", "-verify", "-binary", "-inform", "DER", "-in", put("pages.cms", signature[:size]),
         "-content", put("pages.signed", data[:start] + data[end:]), "-noverify", "-signer", put("pages.pem"), "-out", os.devnull],
        capture_output=True, text=True)
    if outcome.returncode != 0:
        return problem("pages", f"openssl refuses the signature: {outcome.stderr.strip()}")
    der = subprocess.run(["openssl", "x509", "-in", put("pages.pem"), "-outform", "DER"], capture_output=True, check=True).stdout
    if hashlib.sha256(der).hexdigest() != certificate:
        problem("pages", "signed with another certificate than record.json names")


def read_packet(path, folder):
    listing = subprocess.run(["pdfdetach", "-list", path], capture_output=True, text=True, check=True).stdout
    if len(re.findall(r"^\d+: record\.json$", listing, re.M)) != 1:
        raise ValueError("not exactly one record.json")
    subprocess.run(["pdfdetach", "-saveall", "-o", folder, path], capture_output=True, check=True)
    with open(os.path.join(folder, "record.json"), encoding="utf-8") as file:
        return file.read()


def read_export(path, folder):
    with zipfile.ZipFile(path) as archive:
        names = archive.namelist()
        if len(set(names)) != len(names) or [n for n in names if n.lower().endswith("record.json")] != ["record.json"]:
            raise ValueError("not exactly one record.json")
        if archive.testzip() is not None:
            raise ValueError("a check sum is wrong")
        archive.extractall(folder)
        return archive.read("record.json").decode("utf-8")


def main(arguments):
    path = arguments[0]
    roots = arguments[arguments.index("--tsa-roots") + 1] if "--tsa-roots" in arguments else None
    with tempfile.TemporaryDirectory() as folder:
        try:
            begins = open(path, "rb").read(5)
            is_packet, is_export = begins == b"%PDF-", begins[:2] == b"PK"
            if is_packet or is_export:
                text = (read_packet if is_packet else read_export)(path, folder)
            else:
                text = open(path, encoding="utf-8", newline="").read()
            entries, included, certificate, proven = verify(text, roots)
        except (ValueError, KeyError, TypeError, IndexError, subprocess.CalledProcessError, AttributeError,
                zipfile.BadZipFile) as error:
            print(f"unreadable: {type(error).__name__} {error}")
            return 2
        if is_packet and certificate is not None:
            with open(path, "rb") as packet, tempfile.TemporaryDirectory() as apart:
                try:
                    check_pages(packet.read(), certificate, apart)
                except (ValueError, IndexError, subprocess.CalledProcessError) as error:
                    problem("pages", f"{type(error).__name__} {error}")
        for file in included if is_packet or is_export else []:
            attached = os.path.join(folder, file["name"])
            data = open(attached, "rb").read() if os.path.exists(attached) else b""
            if hashlib.sha256(data).hexdigest() != file["sha256"] or len(data) != file["bytes"]:
                problem(f"file {file['name']}", "is missing or not the bytes it should be")
    for line in problems:
        print(line)
    for log, seq, time in proven if roots is not None else []:
        print(f"proven {log} {seq} {time or '-'}")
    print(f"{'altered' if problems else 'unchanged'}: {entries} entries")
    return 1 if problems else 0


if __name__ == "__main__":
    sys.exit(main(sys.argv[1:]))
