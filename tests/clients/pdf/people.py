"""Three people with certificates of a root made for the test, new for every run and worth nothing."""

import datetime
from pathlib import Path

from cryptography import x509
from cryptography.hazmat.primitives import hashes, serialization
from cryptography.hazmat.primitives.asymmetric import rsa
from cryptography.x509.oid import NameOID

PARTS = ["prepared", "checked", "approved"]


def name(words):
    return x509.Name([x509.NameAttribute(NameOID.COMMON_NAME, words)])


def certificate(subject, key, issuer, issuer_key, authority):
    now = datetime.datetime.now(datetime.timezone.utc)
    usage = x509.KeyUsage(not authority, not authority, False, False, False, authority, authority, False, False)
    return (
        x509.CertificateBuilder()
        .subject_name(subject)
        .issuer_name(issuer)
        .public_key(key.public_key())
        .serial_number(x509.random_serial_number())
        .not_valid_before(now - datetime.timedelta(days=1))
        .not_valid_after(now + datetime.timedelta(days=30))
        .add_extension(x509.BasicConstraints(ca=authority, path_length=None), critical=True)
        .add_extension(usage, critical=True)
        .add_extension(x509.SubjectKeyIdentifier.from_public_key(key.public_key()), critical=False)
        .add_extension(x509.AuthorityKeyIdentifier.from_issuer_public_key(issuer_key.public_key()), critical=False)
        .sign(issuer_key, hashes.SHA256())
    )


def write(path, key, cert):
    path.with_suffix(".key").write_bytes(
        key.private_bytes(
            serialization.Encoding.PEM, serialization.PrivateFormat.PKCS8, serialization.NoEncryption()
        )
    )
    path.with_suffix(".pem").write_bytes(cert.public_bytes(serialization.Encoding.PEM))


def make(folder: Path):
    """Writes NAME.key and NAME.pem for the root, each part, and a list of revoked certificates."""
    root_key = rsa.generate_private_key(65537, 2048)
    root = name("Kestrel Flat test root")
    write(folder / "root", root_key, certificate(root, root_key, root, root_key, True))
    for part in PARTS:
        key = rsa.generate_private_key(65537, 2048)
        write(folder / part, key, certificate(name(f"Test person, {part}"), key, root, root_key, False))
    now = datetime.datetime.now(datetime.timezone.utc)
    revoked = (
        x509.CertificateRevocationListBuilder()
        .issuer_name(root)
        .last_update(now - datetime.timedelta(hours=1))
        .next_update(now + datetime.timedelta(days=7))
        .add_extension(x509.CRLNumber(1), critical=False)
        .add_extension(x509.AuthorityKeyIdentifier.from_issuer_public_key(root_key.public_key()), critical=False)
        .sign(root_key, hashes.SHA256())
    )
    (folder / "root.crl").write_bytes(revoked.public_bytes(serialization.Encoding.DER))
