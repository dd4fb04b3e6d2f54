# syntax=docker/dockerfile:1
# The service alone; its database is another container (docker-compose.yml).

FROM golang:1.26-bookworm AS build
WORKDIR /src
COPY go.mod go.sum ./
RUN go mod download
COPY . .
RUN CGO_ENABLED=0 go build -trimpath -o /ratehouse ./cmd/ratehouse

FROM debian:bookworm-slim
RUN apt-get update \
 && apt-get install -y --no-install-recommends ca-certificates tzdata \
 && rm -rf /var/lib/apt/lists/* \
 && useradd --system --uid 10001 --home-dir /var/lib/ratehouse --create-home --shell /usr/sbin/nologin ratehouse
COPY --from=build /ratehouse /usr/local/bin/ratehouse
COPY LICENSE /usr/share/doc/ratehouse/LICENSE
USER 10001
WORKDIR /var/lib/ratehouse
VOLUME /var/lib/ratehouse
ENV RATEHOUSE_DATA=/var/lib/ratehouse RATEHOUSE_ADDR=0.0.0.0:8080
EXPOSE 8080
# Asks the service itself; the image holds no other client.
HEALTHCHECK --interval=10s --timeout=3s --start-period=20s --retries=3 \
  CMD ["bash", "-c", "exec 3<>/dev/tcp/127.0.0.1/8080 && printf 'GET /readyz HTTP/1.0\\r\\nHost: localhost\\r\\n\\r\\n' >&3 && read -r _ code _ <&3 && [ \"$code\" = 200 ]"]
ENTRYPOINT ["ratehouse"]
CMD ["serve"]
