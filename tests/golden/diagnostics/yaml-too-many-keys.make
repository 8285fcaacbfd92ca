printf 'job: yaml-too-many-keys\nset: {maker: x}\nplan: ['
yes x | head -n 20001 | tr '\n' ','
printf ']\n'
