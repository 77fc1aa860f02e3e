# Sourced by tests/run.sh: one server of the release build on a free port of loopback.
binary=target/release/dipcast
server_pid=
server_log=target/steps/server.log

start_server() {
    mkdir -p target/steps
    local port
    port=$(python3 -c 'import socket; s = socket.socket(); s.bind(("127.0.0.1", 0)); print(s.getsockname()[1])')
    base=http://127.0.0.1:$port
    # No outbound requests, no file: only the built-in source of weather.
    DIPCAST__STORE__FILE="" DIPCAST__WEATHER__NASA_POWER__ENABLED=false \
        "$binary" serve --bind "127.0.0.1:$port" > "$server_log" 2>&1 &
    server_pid=$!
    for _ in $(seq 100); do
        curl --silent --fail --output /dev/null "$base/readyz" && return 0
        kill -0 "$server_pid" 2> /dev/null || break
        sleep 0.1
    done
    echo "the server did not become ready; its last words:"
    tail -n 20 "$server_log"
    return 1
}

# Ends the server and checks that it left in good order.
stop_server() {
    [ -n "$server_pid" ] || return 0
    local code=0
    kill -TERM "$server_pid" 2> /dev/null || true
    wait "$server_pid" || code=$?
    server_pid=
    if [ "$code" -ne 0 ]; then
        echo "the server ended with code $code; its last words:"
        tail -n 20 "$server_log"
    fi
    return "$code"
}
