# Two stages: build one static program, then ship it alone.
#
#   docker build -t brakewright .
#   docker run --rm -p 8080:8080 --read-only --cap-drop ALL brakewright

FROM rust:1.95-bookworm AS build
WORKDIR /build
COPY Cargo.toml Cargo.lock ./
COPY src ./src
# The description shows some of them.
COPY examples/requests ./examples/requests
# Static: the final image has no libraries. The system call backend: in a static program the usual way of finding
# random numbers falls back to files that an empty root does not have. The target is named so that these flags
# are not used for build scripts and macros, which run here.
ENV RUSTFLAGS='-C target-feature=+crt-static -C relocation-model=static --cfg getrandom_backend="linux_getrandom"'
RUN target="$(rustc -vV | sed -n 's/^host: //p')" \
    && cargo build --locked --release --bin brakewright --target "$target" \
    && cp "target/$target/release/brakewright" /brakewright

FROM scratch
LABEL org.opencontainers.image.title="Brakewright" \
      org.opencontainers.image.description="Disc brake calculation as a stateless HTTP service" \
      org.opencontainers.image.version="0.1.0" \
      org.opencontainers.image.licenses="MIT OR Apache-2.0"
COPY --from=build /brakewright /brakewright
# No name is needed, so no file of users is either.
USER 65532:65532
# All addresses of the container; what reaches it from outside is decided where it is run.
ENV BRAKEWRIGHT_LISTEN=0.0.0.0:8080 \
    BRAKEWRIGHT_LOG_FORMAT=json
EXPOSE 8080
STOPSIGNAL SIGTERM
HEALTHCHECK --interval=10s --timeout=3s --start-period=2s --retries=3 CMD ["/brakewright", "probe"]
ENTRYPOINT ["/brakewright"]
CMD ["serve"]
