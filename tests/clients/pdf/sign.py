"""Signs a memo as three people do, one after another, in the fields that it has.

python sign.py MEMO.pdf FOLDER    writes FOLDER/signed-1.pdf to signed-3.pdf, and signed-4.pdf with
                                  the data for validating them; prints what pyHanko says of signed-3.pdf
"""

import json
import sys
from pathlib import Path

from asn1crypto import crl
from pyhanko.keys import load_cert_from_pemder
from pyhanko.pdf_utils.content import RawContent
from pyhanko.pdf_utils.incremental_writer import IncrementalPdfFileWriter
from pyhanko.pdf_utils.layout import BoxConstraints
from pyhanko.pdf_utils.reader import PdfFileReader
from pyhanko.sign import fields, signers
from pyhanko.sign.validation import DocumentSecurityStore, validate_pdf_signature
from pyhanko.stamp import StaticStampStyle
from pyhanko_certvalidator import ValidationContext

import people

# A stroke of the pen: a stamp with words would need a font that PDF/A wants embedded.
PEN = RawContent(b"1.2 w 4 12 m 20 40 30 -10 44 22 c 52 40 60 8 96 20 c S", box=BoxConstraints(width=100, height=50))


def sign(source: Path, target: Path, part: str, folder: Path):
    signer = signers.SimpleSigner.load(
        str(folder / f"{part}.key"), str(folder / f"{part}.pem"), ca_chain_files=(str(folder / "root.pem"),)
    )
    metadata = signers.PdfSignatureMetadata(
        field_name=part, md_algorithm="sha256", subfilter=fields.SigSeedSubFilter.PADES
    )
    pdf_signer = signers.PdfSigner(metadata, signer=signer, stamp_style=StaticStampStyle(background=PEN, border_width=0))
    with source.open("rb") as before, target.open("wb") as after:
        pdf_signer.sign_pdf(IncrementalPdfFileWriter(before), output=after, existing_fields_only=True)


def validation_data(source: Path, target: Path, folder: Path):
    """Adds certificates and revocation list, as is done so that a signature can be judged years later."""
    revoked = crl.CertificateList.load((folder / "root.crl").read_bytes())
    certificates = [load_cert_from_pemder(str(folder / f"{part}.pem")) for part in ["root", *people.PARTS]]
    target.write_bytes(source.read_bytes())
    with target.open("r+b") as file:
        signatures = PdfFileReader(file).embedded_signatures
        DocumentSecurityStore.add_dss(
            file, signatures[-1].pkcs7_content, certs=certificates, crls=[revoked]
        )


def main():
    memo, folder = Path(sys.argv[1]), Path(sys.argv[2])
    people.make(folder)
    last = memo
    for number, part in enumerate(people.PARTS, start=1):
        target = folder / f"signed-{number}.pdf"
        sign(last, target, part, folder)
        last = target
    validation_data(last, folder / "signed-4.pdf", folder)

    context = ValidationContext(trust_roots=[load_cert_from_pemder(str(folder / "root.pem"))])
    found = []
    with last.open("rb") as file:
        for signature in PdfFileReader(file).embedded_signatures:
            status = validate_pdf_signature(signature, context)
            found.append(
                {
                    "field": signature.field_name,
                    "intact": status.intact,
                    "valid": status.valid,
                    "trusted": status.trusted,
                    "bottom_line": status.bottom_line,
                    "coverage": status.coverage.name,
                }
            )
    print(json.dumps(found))


main()
